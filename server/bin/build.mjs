// Builds client and server when their sources changed. Node built-ins only.
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync } from 'node:fs';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';

const COMMON = ['package-lock.json', 'tsconfig.json', 'shared'];

/** What is built, from what, by what, and which folders and files show that it was. */
const PARTS = [
  {
    name: 'client',
    sources: [...COMMON, 'angular.json', 'src'],
    tool: ['node_modules/@angular/cli/bin/ng.js', 'build', '--progress=false'],
    folders: ['dist/web'],
    results: ['dist/web/browser/index.html'],
  },
  {
    name: 'server',
    sources: [...COMMON, 'server', 'workers'],
    tool: ['node_modules/typescript/bin/tsc', '-p', 'server/tsconfig.build.json'],
    folders: ['dist/server', 'dist/shared', 'dist/workers'],
    results: ['dist/server/main.js', 'dist/workers/worker-main.js'],
  },
];

/** The parts whose sources are newer than their last build. */
export function staleParts(root) {
  return PARTS.filter(
    (part) =>
      !part.results.every((file) => existsSync(join(root, file))) ||
      readStamp(root, part) !== fingerprint(root, part),
  );
}

/**
 * Builds parts side by side. The stamp is written last, so a build that was broken off is done anew.
 * @param run of tools.mjs
 * @throws Error with what the tool said when one fails
 */
export async function buildParts(run, root, parts) {
  await Promise.all(
    parts.map(async (part) => {
      const stamp = fingerprint(root, part);
      rmSync(stampFile(root, part), { force: true });
      for (const folder of part.folders)
        rmSync(join(root, folder), { recursive: true, force: true });
      const { status, said } = await run(process.execPath, part.tool, {
        cwd: root,
        env: { ...process.env, NG_CLI_ANALYTICS: 'false' },
      });
      if (status !== 0)
        throw new Error(`The ${part.name} could not be built:\n${said.trim().slice(-4_000)}`);
      mkdirSync(join(root, 'dist'), { recursive: true });
      writeFileSync(stampFile(root, part), stamp);
    }),
  );
}

const stampFile = (root, part) => join(root, 'dist', `.built-${part.name}`);

function readStamp(root, part) {
  return existsSync(stampFile(root, part)) ? readFileSync(stampFile(root, part), 'utf8') : null;
}

/** Names, sizes and times of all sources: reading the files themselves would take longer. */
function fingerprint(root, part) {
  const hash = createHash('sha256');
  for (const source of part.sources) visit(join(root, source), hash);
  return hash.digest('hex');
}

function visit(path, hash) {
  const stats = statSync(path, { throwIfNoEntry: false });
  if (!stats) return;
  if (!stats.isDirectory()) {
    if (!path.endsWith('.spec.ts')) hash.update(`${path} ${stats.size} ${stats.mtimeMs}\n`);
    return;
  }
  for (const name of readdirSync(path).sort()) visit(join(path, name), hash);
}
