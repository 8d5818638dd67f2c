import fc from 'fast-check';
import { describe, expect, test, vi } from 'vitest';
import { isCommonPassword } from '#server/modules/auth/common-passwords.ts';
import { createPasswords } from '#server/modules/auth/password-hasher.ts';
import { passwordFault } from '#server/modules/auth/password-rules.ts';
import { cheapHasher, PASSWORD } from '#tests/support/people.ts';
import { testClient } from '#tests/support/test-client.ts';

const nobody = { name: 'Mo Bo', email: 'x@test.example' };

describe('AU-04 passwords', () => {
  test.each([
    ['11 bytes', 'zq9 vk2 wm7', false],
    ['12 bytes', 'zq9 vk2 wm7x', true],
    ['72 bytes', 'zq9 vk2 wm7x'.repeat(1) + 'ö'.repeat(30), true],
    ['73 bytes', `zq9 vk2 wm7x${'ö'.repeat(30)}y`, false],
    ['12 letters of 2 bytes that are 24', 'äöüßéèñçøåæŒ', true],
    ['6 letters of 2 bytes that are 12', 'äöüßéè', true],
  ])('length counts in bytes: %s', (_label, password, isFine) => {
    expect(passwordFault(password, nobody) === null).toBe(isFine);
  });

  test('72 bytes sign in, and no other 72 bytes that begin alike', async () => {
    const passwords = createPasswords(cheapHasher);
    const longest = `${'ö'.repeat(35)}ab`;
    const hash = await passwords.hash(longest);
    expect(await passwords.matches(longest, hash)).toBe(true);
    expect(await passwords.matches(`${'ö'.repeat(35)}ac`, hash)).toBe(false);
    // bcrypt reads 72 bytes: what is longer must be refused, not cut.
    expect(await passwords.matches(`${longest}c`, hash)).toBe(false);
  });

  test.each([
    'password1234',
    'passwordpassword',
    'Password2026!',
    'qwertyuiop123',
    '123456789012',
    'iloveyou1234',
    'P@ssw0rd1234',
    'letmeinletmein',
    'aaaaaaaaaaaa',
    'abcabcabcabc',
    'Welcome12345',
    'correcthorsebatterystaple',
    'administrator1',
    'monkeydragon12',
    'december2026!!',
  ])('common: %s', (password) => {
    expect(isCommonPassword(password)).toBe(true);
  });

  test.each([
    PASSWORD,
    'teapot under 7 ladders',
    'zq9 vk2 wm7x',
    'gravel pigeon lantern mosaic',
    'Tr!cky-Otter-49-Velvet',
  ])('not common: %s', (password) => {
    expect(isCommonPassword(password)).toBe(false);
  });

  test('random letters are not common', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[bcdfghjklmnpqrtvwxz]{16}$/), (password) => {
        fc.pre(new Set(password).size > 6);
        expect(isCommonPassword(password)).toBe(false);
      }),
      { numRuns: 300 },
    );
  });

  test('refused with the name of the product or of the person', () => {
    const person = { name: 'Marguerite Oduya', email: 'mo.rockhound@test.example' };
    expect(passwordFault('my SELVAGE door 77', nobody)).toContain('product');
    for (const password of ['xx marguerite 77', 'ODUYA river 7799', 'the-rockhound-771'])
      expect(passwordFault(password, person)).toContain('name');
    expect(passwordFault('gravel pigeon 771', person)).toBeNull();
  });

  test('a refusal names the field and what was found', async () => {
    const client = await testClient();
    const change = (newPassword: string) =>
      client.as('lead').post('/api/me/password').send({ currentPassword: PASSWORD, newPassword });
    const long = await change('ö'.repeat(37));
    expect([long.status, long.text]).toEqual([400, expect.stringContaining('at most 72 bytes')]);
    const common = await change('password1234');
    expect(common.body).toMatchObject({
      status: 400,
      code: 'weak-password',
      fields: [{ path: 'body.newPassword' }],
    });
  });
});

describe('AU-06 nothing tells whether an account exists', () => {
  test('an unknown account costs one verification, as a known one does', async () => {
    const verify = vi.fn(() => Promise.resolve(false));
    const passwords = createPasswords({ hash: () => Promise.resolve('decoy'), verify });
    expect(await passwords.matches('a password of mine', null)).toBe(false);
    expect(await passwords.matches('a password of mine', 'hash')).toBe(false);
    expect(verify.mock.calls).toEqual([
      ['a password of mine', 'decoy'],
      ['a password of mine', 'hash'],
    ]);
  });

  test('a password is never right for an account that has none, even that of the decoy', async () => {
    const passwords = createPasswords({
      hash: () => Promise.resolve('decoy'),
      verify: () => Promise.resolve(true),
    });
    expect(await passwords.matches('anything at all', null)).toBe(false);
  });

  test('sign-in and reset answer alike for known and unknown addresses', async () => {
    const client = await testClient();
    const answer = async (path: string, body: object) => {
      const { status, body: found } = await client.as(null).post(path).send(body);
      return [status, { ...(found as object), requestId: '' }];
    };
    const wrong = (email: string) =>
      answer('/api/session', { email, password: 'not the password' });
    expect(await wrong('lead@test.example')).toEqual(await wrong('nobody@test.example'));
    const reset = (email: string) => answer('/api/password-resets', { email });
    expect(await reset('lead@test.example')).toEqual([202, { done: true, requestId: '' }]);
    expect(await reset('nobody@test.example')).toEqual([202, { done: true, requestId: '' }]);
  });
});
