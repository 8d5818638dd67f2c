import { once } from 'node:events';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import express, { Router } from 'express';
import { expect, test } from 'vitest';
import * as z from 'zod';
import { endpoint } from '#contract/endpoint.ts';
import { AppError } from '#server/lib/errors.ts';
import { attachGate, mount } from '#server/lib/mount.ts';
import { createStreamWatch } from '#server/lib/stream-watch.ts';

const events = endpoint({
  id: 'events',
  method: 'get',
  path: '/events',
  tag: 'T',
  summary: 'S',
  access: { kind: 'signed-in' },
  produces: 'events',
  response: z.unknown(),
});

/** An app with one event stream, and a guard that can be turned. */
async function streamApp(recheckMs: number) {
  const state = { isAllowed: true };
  const streams = createStreamWatch(recheckMs);
  const app = express();
  const router = Router();
  mount(router, events, ({ res }) => {
    res.writeHead(200, { 'Content-Type': 'text/event-stream' });
    res.write(': open\n\n');
  });
  attachGate(app, { changed: () => undefined,
    guard: {
      admit: () =>
        state.isAllowed
          ? Promise.resolve({ actor: null, member: null })
          : Promise.reject(new AppError(401, 'sign-in-needed', 'Sign in.')),
    },
    idempotency: { once: (_key, work) => work() },
    streams,
  });
  app.use(router);
  const server = createServer(app).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const stream = await fetch(`http://127.0.0.1:${(server.address() as AddressInfo).port}/events`);
  return { state, streams, server, stream };
}

test('AU-03 an open stream ends soon after the session or the right is gone', async () => {
  const { state, server, stream } = await streamApp(40);
  const ended = stream.text();
  const early = await Promise.race([
    ended,
    new Promise((resolve) => setTimeout(() => resolve('still open'), 200)),
  ]);
  expect(early).toBe('still open');
  state.isAllowed = false;
  expect(await ended).toBe(': open\n\n');
  server.close();
});

test('DU-07 a stop ends every stream, so that the server can close', async () => {
  const { streams, server, stream } = await streamApp(60_000);
  const closed = once(server, 'close');
  server.close();
  streams.endAll();
  expect(await stream.text()).toBe(': open\n\n');
  server.closeIdleConnections();
  await closed;
});
