// Brings node_modules in line with the lock file. Node built-ins only.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';

const stampOf = (root) => join(root, 'node_modules', '.seamwright-lock');
const hashOfLock = (root) =>
  createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');

/** Whether node_modules holds what the lock file asks for. */
export function arePackagesCurrent(root) {
  const installed = join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(installed)) return false;
  if (existsSync(stampOf(root))) return readFileSync(stampOf(root), 'utf8') === hashOfLock(root);
  // Installed by hand: npm writes this file last.
  return statSync(installed).mtimeMs >= statSync(join(root, 'package-lock.json')).mtimeMs;
}

/**
 * Runs `npm ci` when needed.
 * @returns whether it had to
 * @throws Error with a sentence when npm fails
 */
export function ensurePackages(root) {
  if (arePackagesCurrent(root)) return false;
  const { command, args } = npmCi();
  const run = spawnSync(command, args, { cwd: root, encoding: 'utf8' });
  settle(root, run.status, `${run.stdout ?? ''}\n${run.stderr ?? run.error?.message ?? ''}`);
  return true;
}

/** The same without blocking, so that a signal can end it. @param run of tools.mjs */
export async function ensurePackagesWith(run, root) {
  if (arePackagesCurrent(root)) return false;
  const { command, args } = npmCi();
  const { status, said } = await run(command, args, { cwd: root });
  settle(root, status, said);
  return true;
}

function settle(root, status, said) {
  if (status !== 0)
    throw new Error(`npm ci failed:\n${said.trim().split('\n').slice(-8).join('\n')}`);
  writeFileSync(stampOf(root), hashOfLock(root));
}

/** The npm that runs us, else the one beside this Node. The build needs the dev packages too. */
function npmCi() {
  const ci = ['ci', '--include=dev', '--no-progress'];
  const running = process.env.npm_execpath;
  if (running?.endsWith('.js')) return { command: process.execPath, args: [running, ...ci] };
  const beside = join(dirname(process.execPath), 'npm');
  return { command: existsSync(beside) ? beside : 'npm', args: ci };
}
