import { beforeAll, describe, expect, test } from 'vitest';
import type { Role, TokenRight } from '#contract/roles.ts';
import { callEndpoint } from '#tests/support/calls.ts';
import type { Who } from '#tests/support/people.ts';
import { type TestClient, testClient } from '#tests/support/test-client.ts';
import {
  BODIES_FOR_FOREIGN_IDS,
  foreignId,
  NAMES_WITHIN,
  QUERIES_FOR_FOREIGN_IDS,
} from './foreign-ids.ts';
import { RIGHTS, type RightsRow } from './rights-table.ts';

interface Caller {
  label: string;
  who: Who;
  /** Role on deposit A. */
  role: Role | null;
  token?: { right: TokenRight; ofDepositA: boolean };
}

const ROLE_CALLERS: readonly Role[] = [
  'lead',
  'geologist',
  'geometallurgist',
  'site-geologist',
  'estimator',
  'viewer',
];
const CALLERS: readonly Caller[] = [
  { label: 'nobody', who: null, role: null },
  { label: 'a person without a deposit', who: 'outsider', role: null },
  { label: 'the lead of another deposit', who: 'lead-of-b', role: null },
  { label: 'an administrator who is no member', who: 'administrator', role: null },
  ...ROLE_CALLERS.map((role) => ({ label: role, who: role, role })),
  ...(['read', 'codes', 'work'] as const).flatMap((right) => [
    {
      label: `a ${right} token of a lead`,
      who: 'lead' as const,
      role: 'lead' as const,
      token: { right, ofDepositA: true },
    },
    {
      label: `a ${right} token of a viewer`,
      who: 'viewer' as const,
      role: 'viewer' as const,
      token: { right, ofDepositA: true },
    },
    {
      label: `a ${right} token of another deposit`,
      who: 'lead-of-b' as const,
      role: null,
      token: { right, ofDepositA: false },
    },
  ]),
];

const REFUSALS = [
  'sign-in-needed',
  'role-needed',
  'token-right',
  'administrators-only',
  'no-such-deposit',
  'foreign-site',
];

function expected(row: RightsRow, caller: Caller): string {
  if (row === 'public') return 'allow';
  if (caller.who === null) return 'sign-in-needed';
  if (typeof row === 'string') {
    if (caller.token) return 'token-right';
    return row === 'signed-in' || caller.who === 'administrator' ? 'allow' : 'administrators-only';
  }
  if (caller.role === null) return 'no-such-deposit';
  if (caller.token && !row.tokens.includes(caller.token.right)) return 'token-right';
  return row.roles.includes(caller.role) ? 'allow' : 'role-needed';
}

let client: TestClient;
beforeAll(async () => {
  client = await testClient();
});

async function headersOf({ who, token }: Caller): Promise<Record<string, string>> {
  if (token) {
    const owner = who ?? 'lead';
    return {
      Authorization: `Bearer ${await client.token(token.right, owner, token.ofDepositA ? client.depositId : client.otherDepositId)}`,
    };
  }
  const ownPage = { 'Sec-Fetch-Site': 'same-origin' };
  return who === null ? ownPage : { ...ownPage, Cookie: `selvage=${client.of(who).cookie}` };
}

/** Signing out comes last: it ends the session the other calls use. */
const inOrder = () =>
  client.app.mounted
    .map(({ endpoint }) => endpoint)
    .sort((left, right) => Number(left.id === 'signOut') - Number(right.id === 'signOut'));

describe('AZ-01 rights are decided by one guard, deny by default', () => {
  test('every mounted endpoint has a row in the table of rights', () => {
    const missing = client.app.mounted
      .map(({ endpoint }) => endpoint.id)
      .filter((id) => !(id in RIGHTS));
    expect(missing).toEqual([]);
  });

  test.each(CALLERS.map((caller) => [caller.label, caller] as const))(
    '%s',
    async (_label, caller) => {
      const headers = await headersOf(caller);
      const found: Record<string, string> = {};
      const wanted: Record<string, string> = {};
      for (const endpoint of inOrder()) {
        const { status, code } = await callEndpoint(client.url, endpoint, {
          params: { depositId: client.depositId },
          headers,
        });
        const row = RIGHTS[endpoint.id];
        wanted[endpoint.id] = row === undefined ? 'no row' : expected(row, caller);
        found[endpoint.id] =
          code !== null && REFUSALS.includes(code)
            ? code
            : status < 500
              ? 'allow'
              : `status ${status}`;
      }
      expect(found).toEqual(wanted);
    },
  );
});

describe('AZ-02 an id of another deposit behaves as one that never existed', () => {
  const asLead = () => ({
    'Sec-Fetch-Site': 'same-origin',
    Cookie: `selvage=${fresh.of('lead').cookie}`,
  });
  let fresh: TestClient;
  beforeAll(async () => {
    fresh = await testClient();
  });
  const ofDeposits = () =>
    fresh.app.mounted
      .map(({ endpoint }) => endpoint)
      .filter((endpoint) => endpoint.access.kind === 'deposit');

  test('another deposit itself', async () => {
    for (const endpoint of ofDeposits()) {
      const foreign = await callEndpoint(fresh.url, endpoint, {
        params: { depositId: fresh.otherDepositId },
        headers: asLead(),
      });
      const never = await callEndpoint(fresh.url, endpoint, {
        params: { depositId: 987_654 },
        headers: asLead(),
      });
      expect([endpoint.id, foreign.status]).toEqual([endpoint.id, 404]);
      expect(foreign.body).toEqual(never.body);
    }
  });

  test("things in another deposit, asked for under one's own", async () => {
    for (const endpoint of ofDeposits()) {
      const names = [...endpoint.path.matchAll(/:(\w+)/g)].map((match) => match[1] ?? '');
      for (const name of names.filter(
        (one) => one !== 'depositId' && !NAMES_WITHIN.includes(one),
      )) {
        const body = JSON.stringify(BODIES_FOR_FOREIGN_IDS[endpoint.id] ?? {});
        const path = endpoint.path + (QUERIES_FOR_FOREIGN_IDS[endpoint.id] ?? '');
        const call = (id: number) =>
          callEndpoint(
            fresh.url,
            { ...endpoint, path },
            { params: { depositId: fresh.depositId, [name]: id }, headers: asLead(), body },
          );
        const foreign = await call(await foreignId(fresh, endpoint.id, name));
        const never = await call(987_654);
        expect([endpoint.id, foreign.status]).toEqual([endpoint.id, 404]);
        expect(foreign.body).toEqual(never.body);
      }
    }
  });
});
