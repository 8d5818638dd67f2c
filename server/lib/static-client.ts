import { existsSync } from 'node:fs';
import { join } from 'node:path';
import express, { type Express } from 'express';
import { requestFacts } from './request-facts.ts';

const NOT_BUILT =
  'The Selvage API answers here, but its pages are not built. Run "npm run build", then start again; during development open the address the client prints.\n';

/** Serves the built client: hashed assets for a year, every other path the one page. */
export function serveClient(app: Express, clientDir: string): void {
  app.use((req, _res, next) => {
    requestFacts(req).route = '(client)';
    next();
  });
  if (!existsSync(join(clientDir, 'index.html'))) {
    app.get('/{*page}', (_req, res) => void res.status(503).type('text/plain').send(NOT_BUILT));
    return;
  }
  app.use(
    '/assets',
    express.static(join(clientDir, 'assets'), {
      immutable: true,
      maxAge: '1y',
      fallthrough: false,
    }),
  );
  app.use(
    express.static(clientDir, {
      index: false,
      cacheControl: false,
      setHeaders: (res) => void res.setHeader('Cache-Control', 'no-cache'),
    }),
  );
  app.get('/{*page}', (_req, res) => {
    res.setHeader('Cache-Control', 'no-cache');
    res.sendFile('index.html', { root: clientDir, cacheControl: false });
  });
}
