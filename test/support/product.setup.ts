import { type ChildProcess, spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';

declare module 'vitest' {
  export interface ProvidedContext {
    productUrl: string;
  }
}

const root = new URL('../..', import.meta.url).pathname;

async function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

async function answers(url: string, child: ChildProcess, deadlineMs: number): Promise<void> {
  const end = Date.now() + deadlineMs;
  while (Date.now() < end) {
    if (child.exitCode !== null) throw new Error(`npm start ended with ${child.exitCode}`);
    try {
      if ((await fetch(`${url}/api/health`)).ok) return;
    } catch {
      // ECONNREFUSED until the server listens.
    }
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
  throw new Error(`The product did not answer within ${deadlineMs / 1000} s`);
}

/** Whether any process of the group is left: npm itself may end before what it started has. */
function isGroupAlive(leader: number): boolean {
  try {
    process.kill(-leader, 0);
    return true;
  } catch {
    return false;
  }
}

async function groupEnd(leader: number, deadlineMs: number): Promise<void> {
  const end = Date.now() + deadlineMs;
  while (isGroupAlive(leader) && Date.now() < end) {
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

/** Starts the product with the command of the README on a port and data folder of its own. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const data = mkdtempSync(join(tmpdir(), 'sw-e2e-'));
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const child = spawn('npm', ['start'], {
    cwd: root,
    env: { ...process.env, PORT: String(port), SEAMWRIGHT_DATA: data },
    stdio: ['ignore', 'inherit', 'inherit'],
    detached: true,
  });
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  try {
    await answers(url, child, 560_000);
  } catch (error) {
    if (child.pid) process.kill(-child.pid, 'SIGTERM');
    throw error;
  }
  project.provide('productUrl', url);
  return async () => {
    if (child.pid && child.exitCode === null) process.kill(-child.pid, 'SIGTERM');
    await ended;
    if (child.pid) await groupEnd(child.pid, 30_000);
    rmSync(data, { recursive: true, force: true, maxRetries: 20, retryDelay: 250 });
  };
}
