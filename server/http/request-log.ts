import { randomUUID } from 'node:crypto';
import type { Logger } from 'pino';
import { type HttpLogger, pinoHttp } from 'pino-http';

/** What a log line never holds, wherever it comes from. */
export const REDACTED_PATHS = [
  'req.headers.cookie',
  'req.headers.authorization',
  'res.headers["set-cookie"]',
  '*.password',
  '*.currentPassword',
  '*.newPassword',
  '*.token',
  '*.secret',
];

/**
 * One line a request: method, path without its query (which may hold a name or an address), status, milliseconds. The
 * request id is ours and goes out as `X-Request-Id` and in every problem, so that a person can name it.
 */
export function requestLog(log: Logger): HttpLogger {
  return pinoHttp({
    logger: log,
    genReqId: (_req, res) => {
      const requestId = randomUUID();
      res.setHeader('X-Request-Id', requestId);
      return requestId;
    },
    quietReqLogger: true,
    customLogLevel: (_req, res, error) => (error || res.statusCode >= 500 ? 'error' : 'info'),
    serializers: {
      req: (req: { method: string; url: string }) => ({ method: req.method, path: req.url.split('?')[0] }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
    },
    wrapSerializers: true,
    customSuccessMessage: () => 'answered',
    customErrorMessage: () => 'failed',
  });
}
