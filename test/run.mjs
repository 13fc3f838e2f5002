// Runs every suite one after another and ends in one plain line: `N passed, N failed`.
// Node built-ins only: this runs before anything is installed.
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ensureDebianPackages } from '../server/bin/debian.mjs';
import { ensurePackages } from '../server/bin/packages.mjs';

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const reports = join(root, 'dist', 'test');
const bin = (name) => join(root, 'node_modules', '.bin', name);
const vitest = (name) => [
  bin('vitest'),
  'run',
  '-c',
  `test/vitest.${name}.config.ts`,
  '--reporter=default',
  '--reporter=json',
  `--outputFile.json=${join(reports, `${name}.json`)}`,
];

/** Suites in order. With a report the tests in it are counted; without one the suite counts as one. */
const suites = [
  { name: 'format', commands: [[bin('prettier'), '--check', '.']] },
  { name: 'lint', commands: [[bin('eslint'), '.']] },
  {
    name: 'types',
    commands: ['.', 'shared', 'server', 'workers', 'test'].map((at) => [bin('tsc'), '-p', at]),
  },
  { name: 'unit', commands: [vitest('unit')], report: 'unit.json' },
  { name: 'web', commands: [[bin('ng'), 'test', '--no-watch']], report: 'web.json' },
  { name: 'api', commands: [vitest('api')], report: 'api.json', debian: ['mariadb-server'] },
  {
    name: 'e2e',
    commands: [vitest('e2e')],
    report: 'e2e.json',
    debian: ['mariadb-server', 'chromium', 'admesh'],
  },
];

const only = process.argv.includes('--only')
  ? process.argv[process.argv.indexOf('--only') + 1].split(',')
  : suites.map((suite) => suite.name);

ensurePackages(root);
const chosen = suites.filter((suite) => only.includes(suite.name));
// The unit checks use admesh as an outside judge; they skip without it, so bring it first.
const wanted = new Set(chosen.flatMap((suite) => suite.debian ?? []));
if (only.includes('unit')) wanted.add('admesh');
const missing = ensureDebianPackages([...wanted]);

mkdirSync(reports, { recursive: true });
let passed = 0;
let failed = 0;
let skipped = 0;
for (const suite of chosen) {
  const started = Date.now();
  console.log(`\n── ${suite.name} ──`);
  const report = suite.report && join(reports, suite.report);
  if (report) rmSync(report, { force: true });
  const ok = suite.commands.every(([command, ...args]) => {
    const run = spawnSync(command, args, { cwd: root, stdio: 'inherit' });
    return run.status === 0;
  });
  const counted = report && existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : null;
  const failures = counted ? counted.numFailedTests : 0;
  passed += counted ? counted.numPassedTests : ok ? 1 : 0;
  skipped += counted ? counted.numPendingTests : 0;
  // A suite that ends badly counts as a failure even when no single test says so.
  failed += ok ? failures : Math.max(1, failures);
  if (report && (!counted || counted.numTotalTests === 0)) {
    failed += ok ? 1 : 0;
    console.log(`${suite.name}: ran no test`);
  }
  console.log(
    `${suite.name}: ${ok ? 'ok' : 'FAILED'} in ${Math.round((Date.now() - started) / 1000)} s`,
  );
}
if (missing.length > 0) console.log(`\nNot installed, so left out: ${missing.join(', ')}`);
console.log(`\n${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}`);
process.exit(failed === 0 && passed > 0 ? 0 : 1);
