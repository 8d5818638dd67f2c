import type { RequestHandler } from 'express';
import helmet from 'helmet';

const YEAR_S = 365 * 24 * 60 * 60;

const CONTENT_SECURITY_POLICY = {
  'default-src': ["'none'"],
  'script-src': ["'self'"],
  'style-src': ["'self'", "'unsafe-inline'"],
  'img-src': ["'self'", 'blob:', 'data:'],
  'font-src': ["'self'"],
  'connect-src': ["'self'"],
  'worker-src': ["'self'", 'blob:'],
  'form-action': ["'self'"],
  'base-uri': ["'none'"],
  'object-src': ["'none'"],
  'frame-ancestors': ["'none'"],
};

/** Headers of every answer. Strict transport only where the instance is reached by TLS. */
export const securityHeaders = (isHttps: boolean): RequestHandler =>
  helmet({
    contentSecurityPolicy: { useDefaults: false, directives: CONTENT_SECURITY_POLICY },
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' },
    strictTransportSecurity: isHttps ? { maxAge: YEAR_S, includeSubDomains: false } : false,
  });
