// Installs Debian packages without asking questions. Node built-ins only.
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';

/** A program that tells whether a package is there, whoever installed it. */
const PROGRAM_OF = { 'mariadb-server': 'mariadbd' };

function isInstalled(name) {
  const program = PROGRAM_OF[name] ?? name;
  return ['/usr/sbin', '/usr/bin', ...(process.env.PATH ?? '').split(delimiter)].some((folder) =>
    existsSync(join(folder, program)),
  );
}

/** Whether we may install: root, and apt is there. */
export function canInstall() {
  return process.getuid?.() === 0 && existsSync('/usr/bin/apt-get');
}

/**
 * Installs what is missing of these packages.
 * @returns the names that are still missing afterwards; empty when all is well
 */
export function ensureDebianPackages(names) {
  const missing = names.filter((name) => !isInstalled(name));
  if (missing.length === 0 || !canInstall()) return missing;
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const apt = (...args) => spawnSync('apt-get', args, { env, encoding: 'utf8' });
  apt('update', '-qq'); // May fail for one stale source and still serve; the install tells.
  const run = apt('install', '-y', '-qq', '--no-install-recommends', ...missing);
  const still = missing.filter((name) => !isInstalled(name));
  if (still.length > 0)
    console.log(`apt-get could not install ${still.join(', ')}: ${lastLine(run)}`);
  return still;
}

function lastLine(run) {
  return `${run.stdout ?? ''}\n${run.stderr ?? ''}`.trim().split('\n').at(-1) ?? '';
}
