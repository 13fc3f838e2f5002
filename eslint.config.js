import { defineConfig } from 'eslint/config';
import js from '@eslint/js';
import tseslint from 'typescript-eslint';
import angular from 'angular-eslint';

/** One rule a folder: what may not be imported there, and what to do instead. */
const closed = (files, patterns) => ({
  files,
  rules: { 'no-restricted-imports': ['error', { patterns }] },
});
const from = (group, message) => ({ group, message });

const UI = from(['**/src/app/**', '@angular/*', 'rxjs', 'rxjs/*'], 'The interface stays in src.');
const SERVER = from(['**/server/**'], 'Server code stays in server; share a contract instead.');
const WORKERS = from(['**/workers/**'], 'Workers are reached through the queue and shared/jobs.');
const CONTRACTS = from(
  ['**/api/*', '**/jobs/*'],
  'Geometry knows no contract; take plain values as arguments.',
);
const NODE = from(['node:*', 'node:*/**'], 'No Node in here; take the bytes as an argument.');

export default defineConfig([
  { ignores: ['dist/', '.angular/', 'var/', 'node_modules/', 'migrations/'] },
  js.configs.recommended,
  {
    files: ['**/*.mjs', '**/*.js'],
    languageOptions: {
      globals: {
        process: 'readonly',
        console: 'readonly',
        URL: 'readonly',
        Buffer: 'readonly',
        setTimeout: 'readonly',
        clearTimeout: 'readonly',
        setInterval: 'readonly',
        clearInterval: 'readonly',
        fetch: 'readonly',
        AbortSignal: 'readonly',
        performance: 'readonly',
      },
    },
  },
  {
    files: ['**/*.ts'],
    extends: [tseslint.configs.recommended],
    languageOptions: { parserOptions: { projectService: true } },
    rules: {
      'no-console': 'error',
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
    },
  },
  {
    files: ['src/**/*.ts'],
    extends: [angular.configs.tsRecommended],
    processor: angular.processInlineTemplates,
    rules: {
      '@angular-eslint/component-selector': [
        'error',
        { type: 'element', prefix: 'sw', style: 'kebab-case' },
      ],
      '@angular-eslint/directive-selector': [
        'error',
        { type: 'attribute', prefix: 'sw', style: 'camelCase' },
      ],
      '@angular-eslint/prefer-on-push-component-change-detection': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: false }],
    },
  },
  {
    files: ['src/**/*.html'],
    extends: [angular.configs.templateRecommended, angular.configs.templateAccessibility],
  },
  closed(
    ['shared/api/**/*.ts', 'shared/jobs/**/*.ts'],
    [
      UI,
      SERVER,
      WORKERS,
      NODE,
      from(['**/geometry/**'], 'Contracts and geometry do not import each other.'),
    ],
  ),
  closed(
    ['shared/geometry/**/*.ts'],
    [
      UI,
      SERVER,
      WORKERS,
      NODE,
      CONTRACTS,
      from(
        ['zod', 'three', 'three/*', 'manifold-3d', 'pino'],
        'A triangulator or a tree comes in as an argument.',
      ),
    ],
  ),
  {
    // The shared tsconfig leaves specs out, so that shared code itself sees no Node; test has them.
    files: ['shared/**/*.spec.ts'],
    languageOptions: { parserOptions: { projectService: false, project: 'test/tsconfig.json' } },
    rules: { 'no-restricted-imports': 'off' },
  },
  closed(['src/**/*.ts'], [SERVER, WORKERS, NODE]),
  closed(
    ['src/app/viewer/scene/**/*.ts'],
    [
      SERVER,
      WORKERS,
      NODE,
      from(
        ['@angular/*', 'rxjs', 'rxjs/*'],
        'The scene is plain three.js; the component feeds it.',
      ),
    ],
  ),
  closed(
    ['server/**/*.ts'],
    [
      UI,
      WORKERS,
      from(
        ['**/geometry/**'],
        'The server decides and stores; geometry runs in workers and in the browser.',
      ),
    ],
  ),
  closed(
    ['server/modules/**/*.router.ts'],
    [
      UI,
      WORKERS,
      from(
        ['drizzle-orm', 'drizzle-orm/*', '**/*.table.js'],
        'A router asks its service; SQL lives in the repository.',
      ),
    ],
  ),
  closed(
    ['server/modules/**/*.service.ts'],
    [
      UI,
      WORKERS,
      from(
        ['express', 'drizzle-orm', 'drizzle-orm/*', '**/*.table.js'],
        'A service decides; SQL lives in the repository.',
      ),
    ],
  ),
  closed(['workers/**/*.ts'], [UI, SERVER]),
  closed(
    ['workers/{intake,planning,joints,printing,proof,building,measuring,export}/**/*.ts'],
    [
      UI,
      SERVER,
      from(
        ['node:worker_threads', 'pino', 'mysql2', 'mysql2/*'],
        'Domain code is pure; jobs and runtime do the talking.',
      ),
    ],
  ),
  {
    files: ['test/**/*.ts', '**/*.spec.ts', 'workers/cli.ts'],
    rules: { 'no-console': 'off' },
  },
  { files: ['test/**/*.ts'], rules: { 'no-restricted-imports': 'off' } },
]);
