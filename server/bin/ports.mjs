// Ports of this machine. Node built-ins only.
import { createServer } from 'node:net';

function listenOn(port, host) {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(port, host, () => {
      const { port: got } = probe.address();
      probe.close(() => resolve(got));
    });
  });
}

/** A loopback port that nobody uses right now. */
export function freePort() {
  return listenOn(0, '127.0.0.1');
}

/** Null when the server can listen there, else a sentence that says why not and what to do. */
export async function whyPortIsUnusable(port, host) {
  try {
    await listenOn(port, host);
    return null;
  } catch (error) {
    const another = `Choose another port, for example: PORT=${port < 65_000 ? port + 1 : 4310} npm start`;
    if (error.code === 'EADDRINUSE')
      return `Port ${port} of ${host} is taken by another program. ${another}`;
    if (error.code === 'EACCES') return `Port ${port} needs more rights than you have. ${another}`;
    if (error.code === 'EADDRNOTAVAIL' || error.code === 'ENOTFOUND')
      return `This machine has no address ${host}. Leave HOST away to use 127.0.0.1.`;
    return `Cannot listen on ${host}:${port} (${error.code ?? error.message}). ${another}`;
  }
}
