import { describe, expect, test } from 'vitest';
import type { Actor } from '#server/lib/actor.ts';
import { type AccessRule, decide } from '#server/lib/guard.ts';

const person = (via: Actor['via'] = { kind: 'session', sessionId: 's' }): Actor => ({
  id: 1,
  name: 'P',
  email: 'p@test.example',
  isAdministrator: false,
  via,
});
const token = (right: 'read' | 'codes' | 'work', depositId = 7): Actor =>
  person({ kind: 'token', tokenId: 1, depositId, right });
const deposit = (extra: Partial<AccessRule> = {}, codes = false): AccessRule => ({
  access: { kind: 'deposit', roles: ['lead'], codes },
  method: 'get',
  sessionOnly: false,
  ...extra,
});

describe('AZ-01 the decision', () => {
  test.each([
    ['a codes token fetches codes', deposit({}, true), token('codes'), 'allow'],
    ['a codes token fetches nothing else', deposit(), token('codes'), 'token-right'],
    [
      'a codes token changes nothing',
      deposit({ method: 'post' }, true),
      token('codes'),
      'token-right',
    ],
    ['a read token reads', deposit(), token('read'), 'allow'],
    ['a read token changes nothing', deposit({ method: 'put' }), token('read'), 'token-right'],
    ['a work token works', deposit({ method: 'delete' }), token('work'), 'allow'],
    [
      'no token gets in at a page-only endpoint',
      deposit({ sessionOnly: true }),
      token('work'),
      'token-right',
    ],
    ['a token of another deposit sees no deposit', deposit(), token('work', 8), 'no-such-deposit'],
    ['a session gets in', deposit({ method: 'post', sessionOnly: true }), person(), 'allow'],
  ] as const)('%s', (_label, rule, actor, verdict) => {
    expect(decide(rule, actor, 7, 'lead')).toBe(verdict);
  });

  test('a deposit endpoint whose address names no deposit lets nobody in', () => {
    expect(decide(deposit(), person(), null, 'lead')).toBe('no-such-deposit');
  });

  test('an administrator has no rights on a deposit by that', () => {
    expect(decide(deposit(), { ...person(), isAdministrator: true }, 7, null)).toBe(
      'no-such-deposit',
    );
  });
});
