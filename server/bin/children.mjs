// Starts the server and the worker, and starts the worker again when it dies. Node built-ins only.
import { spawn } from 'node:child_process';
import { closeSync, mkdirSync, openSync, renameSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { endChild } from './processes.mjs';

const LARGEST_LOG_BYTES = 20 * 1024 * 1024;
const FIRST_PAUSE_MS = 1_000;
const LONGEST_PAUSE_MS = 30_000;
/** A worker that lived this long was well: the next pause is the shortest again. */
const WELL_AFTER_MS = 60_000;

/** Opens a log for appending; a large one is put aside first. */
function openLog(folder, name) {
  mkdirSync(folder, { recursive: true });
  const file = join(folder, `${name}.log`);
  if ((statSync(file, { throwIfNoEntry: false })?.size ?? 0) > LARGEST_LOG_BYTES)
    renameSync(file, `${file}.old`);
  return openSync(file, 'a', 0o600);
}

function spawnLogged({ root, logs, name, script, env }) {
  const log = openLog(logs, name);
  const child = spawn(process.execPath, [join(root, script)], {
    cwd: root,
    env,
    // A group of its own: Ctrl-C reaches the starter alone, which then ends things in order. The
    // channel closes when the starter dies, and tells the child to end as well.
    detached: true,
    stdio: ['ignore', log, 'pipe', 'ipc'],
  });
  closeSync(log);
  return child;
}

/**
 * Starts the server and waits until it listens.
 * @param onStep called with each step the server reports and its time
 * @returns the child, its address and the demo accounts
 * @throws Error with the server's own sentence when it cannot start
 */
export function startServer({ root, logs, env, onStep, note }) {
  const child = spawnLogged({ root, logs, name: 'server', script: 'dist/server/main.js', env });
  note(child);
  let said = '';
  child.stderr.on('data', (chunk) => (said = (said + chunk).slice(-4_000)));
  return new Promise((resolve, reject) => {
    const onExit = () => reject(new Error(said.trim() || `The server ended. See ${logs}.`));
    child.once('error', reject);
    child.once('exit', onExit);
    child.on('message', (message) => {
      if (message.kind === 'step') onStep(message.what, message.ms);
      if (message.kind !== 'ready') return;
      child.off('exit', onExit);
      resolve({ child, address: message.address, demoAccounts: message.demoAccounts });
    });
  });
}

/** Keeps a worker running. @returns how to end it for good */
export function keepWorker({ root, logs, env, tell, note }) {
  let child = null;
  let timer = null;
  let pauseMs = FIRST_PAUSE_MS;
  let isEnding = false;

  function start() {
    timer = null;
    const started = Date.now();
    child = spawnLogged({ root, logs, name: 'worker', script: 'dist/workers/worker-main.js', env });
    note(child);
    let said = '';
    child.stderr.on('data', (chunk) => (said = (said + chunk).slice(-2_000)));
    child.once('exit', (code, signal) => {
      if (isEnding) return;
      if (Date.now() - started > WELL_AFTER_MS) pauseMs = FIRST_PAUSE_MS;
      const why = said.trim().split('\n').at(-1) || `${signal ?? `exit code ${code}`}`;
      tell(`The worker ended (${why}); it starts again in ${pauseMs / 1000} s. Log: ${logs}`);
      timer = setTimeout(start, pauseMs);
      pauseMs = Math.min(2 * pauseMs, LONGEST_PAUSE_MS);
    });
  }

  start();
  return {
    async end() {
      isEnding = true;
      if (timer) clearTimeout(timer);
      await endChild(child, 8_000);
    },
  };
}
