import type { TestClient } from '#tests/support/test-client.ts';

/** Makes one thing in deposit B and answers its id, by the name of the id's parameter. */
type Maker = (client: TestClient) => Promise<number | string>;

const firstId = (ids: readonly number[]): number => {
  const [id] = ids;
  if (id === undefined) throw new Error('nothing was made in deposit B');
  return id;
};

const FAR_AWAY = '2999-01-01T00:00:00.000Z';
const NOW = '2026-01-01T00:00:00.000Z';

/** A parameter of a deposit endpoint that is missing here fails the test of foreign ids. */
export const FOREIGN_IDS: Readonly<Record<string, Maker>> = {
  userId: ({ of }) => Promise.resolve(of('lead-of-b').id),
  invitationId: async ({ db, otherDepositId, of }) =>
    firstId(
      await db('invitations').insert({
        deposit_id: otherDepositId, role: 'viewer', email: 'somebody@test.example', token_hash: 'of a test', invited_by: of('lead-of-b').id, created_at: NOW, expires_at: FAR_AWAY,
      }),
    ),
  tokenId: async ({ db, otherDepositId, token }) => {
    await token('read', 'lead-of-b', otherDepositId);
    const rows: { id: number }[] = await db('api_tokens').where({ deposit_id: otherDepositId }).select('id');
    return firstId(rows.map((row) => row.id));
  },
  jobId: async ({ db, otherDepositId, of }) =>
    firstId(
      await db('jobs').insert({
        deposit_id: otherDepositId, kind: 'assemble', title: 'A job of B', params: '{}', state: 'done', started_by: of('lead-of-b').id, created_at: NOW,
      }),
    ),
};

/** Bodies good enough to reach the id, for endpoints that read one. */
export const BODIES_FOR_FOREIGN_IDS: Readonly<Record<string, object>> = {
  changeMemberRole: { role: 'viewer' },
};
