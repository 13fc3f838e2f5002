import { spawn } from 'node:child_process';
import { createConnection, createServer, type Socket } from 'node:net';
import { fileURLToPath } from 'node:url';

const repository = fileURLToPath(new URL('../..', import.meta.url));

export interface WorkerProcess {
  /** Sends a signal and waits for the end; gives the exit code, null when killed. */
  readonly end: (signal: NodeJS.Signals) => Promise<number | null>;
  /** Everything it logged so far. */
  readonly log: () => string;
}

/** Starts the real worker process from source and waits until it is ready. */
export async function startWorker(env: Record<string, string>): Promise<WorkerProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'workers/worker-main.ts'], {
    cwd: repository,
    env: { ...process.env, ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  const ended = new Promise<number | null>((resolve) => child.on('exit', resolve));
  await new Promise<void>((resolve, reject) => {
    const take = (chunk: Buffer) => {
      output += chunk.toString();
      if (output.includes('worker ready')) resolve();
    };
    child.stdout.on('data', take);
    child.stderr.on('data', take);
    child.on('exit', () => reject(new Error(`The worker ended:\n${output}`)));
  });
  return {
    end: async (signal) => {
      child.kill(signal);
      return await ended;
    },
    log: () => output,
  };
}

/** A door before a server that can be shut: every connection breaks and new ones are turned away. */
export async function openGate(target: URL): Promise<{
  readonly url: string;
  readonly shut: () => void;
  readonly open: () => void;
  readonly close: () => void;
}> {
  const sockets = new Set<Socket>();
  let isShut = false;
  const server = createServer((client) => {
    if (isShut) {
      client.destroy();
      return;
    }
    const upstream = createConnection(Number(target.port), target.hostname);
    for (const [from, to] of [
      [client, upstream],
      [upstream, client],
    ] as const) {
      sockets.add(from);
      from.pipe(to);
      from.on('error', () => to.destroy());
      from.on('close', () => {
        sockets.delete(from);
        to.destroy();
      });
    }
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.address();
  const url = new URL(target.href);
  url.port = String(typeof address === 'object' && address ? address.port : 0);
  const breakAll = () => sockets.forEach((socket) => socket.destroy());
  return {
    url: url.href,
    shut: () => {
      isShut = true;
      breakAll();
    },
    open: () => {
      isShut = false;
    },
    close: () => {
      breakAll();
      server.close();
    },
  };
}
