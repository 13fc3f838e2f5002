import cookieParser from 'cookie-parser';
import express, { type Express } from 'express';
import { createNothingHere } from './platform/http/api-error.js';
import { createErrorAnswer } from './platform/http/error-answer.js';
import { mountRoutes, type Route } from './platform/http/routes.js';
import { createSecurityHeaders } from './platform/http/security-headers.js';
import type { Session } from './platform/http/session-context.js';
import { serveWebClient } from './platform/http/web-client.js';
import { createRequestLog, type Logger } from './platform/logging/logger.js';
import { accessTokenOf } from './modules/session/session-cookies.js';

const LARGEST_JSON = '256kb';

/** The Express application around the routes of `compose`. */
export function createApp(deps: {
  routes: readonly Route[];
  authenticate: (accessToken: string) => Promise<Session | null>;
  secret: string;
  logger: Logger;
  webFolder: string;
  proxies: number;
}): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', deps.proxies);
  app.use(createRequestLog(deps.logger));
  app.use(createSecurityHeaders());
  app.use('/api', (_req, res, next) => {
    // Answers about people's work stay out of every cache; file routes say otherwise themselves.
    res.setHeader('Cache-Control', 'no-store');
    next();
  });
  app.use('/api', cookieParser(), express.json({ limit: LARGEST_JSON }));
  mountRoutes(app, deps.routes, {
    secret: deps.secret,
    authenticate: async (req) => {
      const token = accessTokenOf(req);
      return token ? deps.authenticate(token) : null;
    },
  });
  app.use('/api', () => {
    throw createNothingHere();
  });
  serveWebClient(app, deps.webFolder);
  app.use(() => {
    throw createNothingHere();
  });
  app.use(createErrorAnswer(deps.logger));
  return app;
}
