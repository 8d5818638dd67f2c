import type { Request } from 'express';
import { AppError } from './errors.ts';

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a change asked for by another site. Browsers tell where a request comes from
 * (`Sec-Fetch-Site`, or `Origin` where that is missing); without either it is refused. Requests
 * with a bearer token carry no cookie's power and are not asked.
 *
 * @param publicUrl Where this instance is reached.
 */
export function refuseForeignSite(req: Request, publicUrl: string): void {
  if (SAFE_METHODS.has(req.method)) return;
  const site = req.get('sec-fetch-site');
  if (site !== undefined ? site === 'same-origin' : req.get('origin') === new URL(publicUrl).origin)
    return;
  throw new AppError(
    403,
    'foreign-site',
    `Changes are accepted only from this instance's own pages: open it at ${publicUrl}. Programs send an API token.`,
  );
}
