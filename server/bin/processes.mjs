// Looking at and ending processes that an earlier start left behind. Node built-ins only.
import { readFileSync } from 'node:fs';

const wait = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/** Whether a process with this number runs and is not a zombie. */
export function isAlive(pid) {
  if (!Number.isInteger(pid) || pid <= 1) return false;
  try {
    process.kill(pid, 0);
  } catch (error) {
    // EPERM: it runs, but belongs to someone else.
    return error.code === 'EPERM';
  }
  return !/^State:\s+Z/m.test(readProc(pid, 'status'));
}

/** The command line as one string; empty where there is no /proc or no such process. */
export function commandLineOf(pid) {
  return readProc(pid, 'cmdline').replaceAll('\0', ' ').trim();
}

function readProc(pid, name) {
  try {
    return readFileSync(`/proc/${pid}/${name}`, 'utf8');
  } catch {
    // ENOENT, ESRCH: gone, or a system without /proc.
    return '';
  }
}

/**
 * When a process started, in ticks since the machine did: together with the number it names one
 * process for ever, as numbers are used again. Null where there is no /proc or no such process.
 */
export function startTicksOf(pid) {
  return statField(pid, 22);
}

/** Who started a process. Null where there is no /proc or no such process. */
export function parentOf(pid) {
  return statField(pid, 4);
}

/** A number of proc(5) stat. The second field may hold spaces, so count from its closing bracket. */
function statField(pid, number) {
  const fields = readProc(pid, 'stat').split(') ').at(-1)?.split(' ') ?? [];
  return fields.length > 19 ? Number(fields[number - 3]) : null;
}

/** Asks a process to end and insists after `graceMs`. Resolves when it is gone. */
export async function endProcess(pid, graceMs = 10_000) {
  signal(pid, 'SIGTERM');
  for (let waited = 0; isAlive(pid); waited += 50) {
    if (waited >= graceMs) signal(pid, 'SIGKILL');
    if (waited >= graceMs + 5_000) return;
    await wait(50);
  }
}

function signal(pid, name) {
  try {
    process.kill(pid, name);
  } catch {
    // ESRCH: it ended by itself meanwhile.
  }
}

/** The same for a child of ours; resolves at once when it has ended already. */
export async function endChild(child, graceMs = 10_000) {
  if (!child || child.exitCode !== null || child.signalCode !== null) return;
  const ended = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  const insist = setTimeout(() => child.kill('SIGKILL'), graceMs);
  await ended;
  clearTimeout(insist);
}
