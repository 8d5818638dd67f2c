import { act, render, screen } from '@testing-library/react';
import fc from 'fast-check';
import { createMemoryRouter, RouterProvider, useLocation } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import {
  formatUrl,
  parseUrl,
  urlFlag,
  urlList,
  urlMaybeNumber,
  urlNumber,
  urlNumbers,
  urlOneOf,
  urlText,
  useUrlState,
} from '#src/lib/url-state.ts';

const FIELDS = {
  x: urlText('PC1'),
  k: urlNumber(6),
  limit: urlMaybeNumber(),
  open: urlFlag(false),
  mode: urlOneOf(['lasso', 'box', 'pan'], 'lasso'),
  holes: urlList(),
  groups: urlNumbers(),
};

const finite = fc
  .double({ noNaN: true, noDefaultInfinity: true })
  .map((value) => (Object.is(value, -0) ? 0 : value));

describe('address', () => {
  it('UX-04 comes back as it was written, whatever the values', () => {
    const values = fc.record({
      x: fc.string(),
      k: finite,
      limit: fc.option(finite),
      open: fc.boolean(),
      mode: fc.constantFrom('lasso', 'box', 'pan'),
      holes: fc.array(fc.string()),
      groups: fc.array(finite),
    });
    fc.assert(
      fc.property(values, (view) => {
        const text = formatUrl(FIELDS, new URLSearchParams(), view).toString();
        expect(parseUrl(FIELDS, new URLSearchParams(text))).toEqual(view);
      }),
      { numRuns: 500 },
    );
  });

  it('leaves defaults out and other owners in', () => {
    const before = new URLSearchParams('page=3&k=9');
    expect(formatUrl(FIELDS, before, { k: 6, x: 'PC2' }).toString()).toBe('page=3&x=PC2');
  });

  it.each(['k=', 'k=six', 'k=1e999', 'mode=circle', 'open=yes', 'groups=,,x', 'holes='])(
    'reads the garbled %s as its default',
    (text) => {
      expect(parseUrl(FIELDS, new URLSearchParams(text))).toEqual({
        x: 'PC1',
        k: 6,
        limit: null,
        open: false,
        mode: 'lasso',
        holes: [],
        groups: [],
      });
    },
  );
});

it('useUrlState replaces by default and pushes a step when told', async () => {
  const set: { run?: ReturnType<typeof useUrlState<typeof FIELDS>>[1] } = {};
  function Page() {
    const [view, change] = useUrlState(FIELDS);
    set.run = change;
    return <p>{`${view.k} ${useLocation().search}`}</p>;
  }
  const router = createMemoryRouter([{ path: '/', element: <Page /> }], {
    initialEntries: ['/?k=4'],
  });
  render(<RouterProvider router={router} />);
  expect(screen.getByText('4 ?k=4')).toBeInTheDocument();
  act(() => set.run?.({ k: 5 }));
  act(() => set.run?.({ k: 7 }, { push: true }));
  expect(screen.getByText('7 ?k=7')).toBeInTheDocument();
  await act(async () => router.navigate(-1));
  expect(screen.getByText('5 ?k=5')).toBeInTheDocument();
});
