import { existsSync } from 'node:fs';
import { join } from 'node:path';
import express, { type Express } from 'express';
import { createNothingHere } from './api-error.js';

/** The builder's names carry a hash of the content, such as `chunk-5TQ7X3AB.js`. */
const HASHED = /-[A-Z0-9]{8}\.[a-z0-9]+$/;
const YEAR_S = 365 * 24 * 60 * 60;

/**
 * Serves the built client. Hashed files are kept for a year, all else is asked for anew; any
 * address without a file is the client's own and gets its page.
 */
export function serveWebClient(app: Express, folder: string): void {
  app.use(
    express.static(folder, {
      index: false,
      setHeaders(res, path) {
        const isHashed = HASHED.test(path);
        res.setHeader(
          'Cache-Control',
          isHashed ? `public, max-age=${YEAR_S}, immutable` : 'no-cache',
        );
      },
    }),
  );
  app.get('/{*path}', (req, res) => {
    // A missing picture or script must not be answered with the page.
    if (/\.[a-z0-9]+$/i.test(req.path)) throw createNothingHere();
    if (!existsSync(join(folder, 'index.html')))
      throw new Error('The client is not built: run `npm run build:web` or `npm start`');
    res.sendFile('index.html', { root: folder, headers: { 'Cache-Control': 'no-cache' } });
  });
}
