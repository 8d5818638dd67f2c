import type { RequestHandler } from 'express';
import { pinoHttp } from 'pino-http';
import type { Log } from './log.ts';
import { requestFacts } from './request-facts.ts';

/**
 * One line per request: id, person, deposit, route pattern, status and milliseconds. Neither URL,
 * headers nor bodies are logged, so no password, cookie, token or assay value can be.
 */
export function requestLog(log: Log): RequestHandler[] {
  const line = pinoHttp({
    logger: log,
    genReqId: (req, res) => {
      const { requestId } = requestFacts(req);
      res.setHeader('X-Request-Id', requestId);
      return requestId;
    },
    quietReqLogger: true,
    quietResLogger: true,
    customAttributeKeys: { responseTime: 'ms', reqId: 'requestId' },
    customLogLevel: (_req, res, error) => (res.statusCode >= 500 || error ? 'error' : 'info'),
    customSuccessMessage: () => 'request',
    customErrorMessage: () => 'request',
    // The library's own object is left out: it holds the answer's headers, and so the session cookie.
    customErrorObject: (req, res, _error, { ms }: { ms: number }) => ({
      ...describe(req, res.statusCode),
      ms,
    }),
    customSuccessObject: (req, res, { ms }: { ms: number }) => ({
      ...describe(req, res.statusCode),
      ms,
    }),
  });
  return [(req, res, next) => line(req, res, next)];
}

function describe(req: Parameters<typeof requestFacts>[0], status: number): object {
  const { route, userId, depositId } = requestFacts(req);
  return { method: req.method, route: route ?? '(none)', status, userId, depositId };
}
