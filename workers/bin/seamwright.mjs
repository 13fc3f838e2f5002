#!/usr/bin/env node
// Runs the command line from source. Built-ins only: it works before anything is installed.
import { spawn, spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { constants } from 'node:os';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = fileURLToPath(new URL('../../', import.meta.url));
const loader = fileURLToPath(new URL('../../node_modules/tsx/dist/loader.mjs', import.meta.url));
const commandLine = fileURLToPath(new URL('../cli.ts', import.meta.url));

if (!existsSync(loader)) installPackages();
// npm runs scripts in the package's folder; paths are meant from where the person stands.
const cwd = process.env.npm_lifecycle_event === 'seamwright' && process.env.INIT_CWD;
const child = spawn(
  process.execPath,
  ['--import', pathToFileURL(loader).href, commandLine, ...process.argv.slice(2)],
  { stdio: 'inherit', cwd: cwd || process.cwd() },
);
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => child.kill(signal));
child.on('error', (error) => {
  console.error(`The command line could not be started: ${error.message}.`);
  process.exit(2);
});
child.on('exit', (code, signal) => {
  process.exit(code ?? 128 + (constants.signals[signal] ?? 0));
});

/** Standard output belongs to the result, so npm talks on standard error. */
function installPackages() {
  console.error('Installing packages (first run only) ...');
  const npm = process.platform === 'win32' ? 'npm.cmd' : 'npm';
  const { status, error } = spawnSync(npm, ['ci'], { cwd: root, stdio: ['ignore', 2, 2] });
  if (status === 0 && existsSync(loader)) return;
  console.error(
    `The packages could not be installed${error ? ` (${error.message})` : ''}: run "npm ci" in the project's folder and try again.`,
  );
  process.exit(2);
}
