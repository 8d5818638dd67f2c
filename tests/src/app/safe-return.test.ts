import { expect, it } from 'vitest';
import { safeReturn, signInAddress } from '#src/app/safe-return.ts';

it.each([
  ['/deposits/4/groups?k=6', '/deposits/4/groups?k=6'],
  [null, '/deposits'],
  ['', '/deposits'],
  ['https://elsewhere.example/', '/deposits'],
  ['//elsewhere.example', '/deposits'],
  ['/\\elsewhere.example', '/deposits'],
  ['javascript:alert(1)', '/deposits'],
])('after sign-in %s leads to %s', (asked, path) => {
  expect(safeReturn(asked)).toBe(path);
});

it('remembers where one was going', () => {
  expect(signInAddress('/deposits/4/groups?k=6')).toBe(
    '/sign-in?to=%2Fdeposits%2F4%2Fgroups%3Fk%3D6',
  );
  expect(signInAddress('/deposits')).toBe('/sign-in');
});
