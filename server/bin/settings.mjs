// The starter's settings, read before anything is installed. Node built-ins only.
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

const OLDEST_NODE = [20, 19];

/** @throws Error with a sentence when a setting is wrong or Node is too old */
export function readSettings(env = process.env) {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1]))
    throw new Error(
      `Node ${OLDEST_NODE.join('.')} or newer is needed; this is ${process.version}.`,
    );
  const port = Number(env.PORT || 4310);
  if (!Number.isInteger(port) || port < 1 || port > 65_535)
    throw new Error(`PORT must be a whole number from 1 to 65535, not “${env.PORT}”.`);
  const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
  const data = resolve(root, env.SEAMWRIGHT_DATA || 'var');
  return {
    root,
    port,
    host: env.HOST || '127.0.0.1',
    data,
    logs: join(data, 'logs'),
    databaseUrl: env.DATABASE_URL || null,
  };
}
