import { type Logger, pino } from 'pino';
import { pinoHttp } from 'pino-http';

export type { Logger };

/** JSON lines on stdout. Tokens, cookies and passwords never reach a log. */
export function createLogger(level: string): Logger {
  return pino({
    level,
    redact: {
      paths: [
        'req.headers.cookie',
        'req.headers.authorization',
        'req.headers["x-xsrf-token"]',
        'res.headers["set-cookie"]',
        'password',
        '*.password',
      ],
      censor: '[hidden]',
    },
  });
}

/** One line a request to the API. Expected refusals are information, ours are errors. */
export function createRequestLog(logger: Logger) {
  return pinoHttp({
    logger,
    autoLogging: { ignore: (req) => !req.url?.startsWith('/api/') || req.url === '/api/health' },
    customLogLevel: (_req, res, error) => (error || res.statusCode >= 500 ? 'error' : 'info'),
    serializers: {
      req: (req: { method: string; url: string; id: unknown }) => ({
        id: req.id,
        method: req.method,
        url: req.url,
      }),
      res: (res: { statusCode: number }) => ({ statusCode: res.statusCode }),
    },
  });
}
