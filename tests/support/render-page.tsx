import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { configure, render } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import type { ReactNode } from 'react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, vi } from 'vitest';
import { Toasts } from '#src/components/ui/toasts.tsx';

interface Asked {
  body: unknown;
  url: URL;
  headers: Headers;
}

/** A body (status 200) or a made response; or what makes one of the request. */
export type Answer = object | null | ((request: Asked) => unknown);

/** By method and path below `/api`: `'GET /deposits/1'`. */
export type Answers = Record<string, Answer>;

export interface SentRequest {
  key: string;
  url: URL;
  body: unknown;
  headers: Headers;
}

class StillObserver {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
}

// A page under test shares the machine with the others: waiting may take longer than the usual second.
configure({ asyncUtilTimeout: 10_000 });

/** What a browser has and the test's document has not. */
beforeEach(() => {
  vi.stubGlobal('ResizeObserver', StillObserver);
  Element.prototype.scrollIntoView = () => undefined;
  Element.prototype.hasPointerCapture = () => false;
  Element.prototype.scrollTo = () => undefined;
});
afterEach(() => vi.unstubAllGlobals());

const problem = (status: number, detail: string, more: object = {}) =>
  new Response(
    JSON.stringify({
      type: '/problems/test',
      title: 'Refused',
      status,
      code: 'test',
      detail,
      requestId: 'r-1',
      ...more,
    }),
    { status },
  );

export { problem };

/** Puts a table of answers in the place of the server. @returns what was asked of it. */
export function stubFetch(answers: Answers): SentRequest[] {
  const sent: SentRequest[] = [];
  vi.stubGlobal('fetch', (input: string, init: RequestInit = {}) => {
    const url = new URL(input, 'http://localhost');
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined;
    const headers = new Headers(init.headers);
    const key = `${init.method ?? 'GET'} ${url.pathname.replace(/^\/api/, '')}`;
    sent.push({ key, url, body, headers });
    if (!(key in answers)) return Promise.resolve(problem(404, `no answer for ${key}`));
    const answer = answers[key];
    const made: unknown = typeof answer === 'function' ? answer({ body, url, headers }) : answer;
    return Promise.resolve(
      made instanceof Response ? made.clone() : new Response(JSON.stringify(made)),
    );
  });
  return sent;
}

interface Options {
  answers?: Answers;
  /** Route pattern the element stands at. */
  path?: string;
  /** Address opened. */
  at?: string;
}

/** Renders an element as the page at an address, with the server replaced by a table of answers. */
export function renderPage(
  element: ReactNode,
  { answers = {}, path = '/', at = path }: Options = {},
) {
  const sent = stubFetch(answers);
  const queryClient = new QueryClient({
    defaultOptions: { queries: { retry: false, staleTime: 60_000 } },
  });
  const router = createMemoryRouter(
    [
      { path, element },
      { path: '*', element: <p>another page</p> },
    ],
    { initialEntries: [at] },
  );
  const view = render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
      <Toasts />
    </QueryClientProvider>,
  );
  return { ...view, user: userEvent.setup({ applyAccept: false }), sent, router, queryClient };
}
