// Runs a tool to its end, in a way that can be broken off. Node built-ins only.
import { spawn } from 'node:child_process';
import { endChild } from './processes.mjs';

/** A runner whose tools all end when `endAll` is called. */
export function createTools() {
  const running = new Set();

  /** @returns the exit status and all that the tool said */
  function run(command, args, { cwd, env = process.env }) {
    return new Promise((resolve, reject) => {
      const child = spawn(command, args, { cwd, env, stdio: ['ignore', 'pipe', 'pipe'] });
      running.add(child);
      let said = '';
      const listen = (chunk) => (said = (said + chunk).slice(-20_000));
      child.stdout.on('data', listen);
      child.stderr.on('data', listen);
      child.once('error', (error) => {
        running.delete(child);
        reject(error);
      });
      child.once('close', (status) => {
        running.delete(child);
        resolve({ status, said });
      });
    });
  }

  return {
    run,
    endAll: () => Promise.all([...running].map((child) => endChild(child, 2_000))),
  };
}
