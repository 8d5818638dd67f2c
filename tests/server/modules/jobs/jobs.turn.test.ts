import fc from 'fast-check';
import { describe, expect, it, test } from 'vitest';
import type { WaitingJob } from '#server/modules/jobs/jobs.repository.ts';
import { nextInTurn } from '#server/modules/jobs/jobs.turn.ts';

const job = (id: number, depositId: number, runsAlone = false): WaitingJob => ({ id, depositId, runsAlone });

describe('whose turn it is', () => {
  it.each([
    ['nobody', [], [], 0, null],
    ['the oldest of a deposit', [job(1, 7), job(2, 7)], [], 0, 1],
    ['the next deposit in the round', [job(1, 1), job(2, 1), job(3, 2)], [], 1, 3],
    ['the first deposit again at the end of the round', [job(4, 1), job(5, 2)], [], 2, 4],
    ['no second job of a busy deposit', [job(1, 1)], [job(9, 1)], 0, null],
    ['another deposit beside a busy one', [job(1, 1), job(2, 2)], [job(9, 1)], 1, 2],
    ['nothing beside a job that runs alone', [job(1, 1)], [job(9, 2, true)], 0, null],
    ['not yet the job that must run alone', [job(1, 1, true)], [job(9, 2)], 0, null],
    ['the job that must run alone, once it can', [job(1, 1, true)], [], 0, 1],
  ])('%s', (_name, waiting, running, lastDepositId, expected) => {
    expect(nextInTurn(waiting, running, lastDepositId)?.id ?? null).toBe(expected);
  });

  test('JO-06 a flood of one deposit never makes another wait longer than a round', () => {
    const deposits = fc.uniqueArray(fc.integer({ min: 1, max: 50 }), { minLength: 2, maxLength: 8 });
    const holds = (depositIds: number[], flood: number): void => {
      const [first] = depositIds;
      let waiting = Array.from({ length: flood }, (_, index) => job(index + 1, first ?? 0));
      waiting = [...waiting, ...depositIds.slice(1).map((depositId, index) => job(flood + 1 + index, depositId))];
      let last = 0;
      const served: number[] = [];
      while (waiting.length > 0) {
        const next = nextInTurn(waiting, [], last);
        if (!next) throw new Error('nobody was served');
        served.push(next.depositId);
        last = next.depositId;
        waiting = waiting.filter(({ id }) => id !== next.id);
      }
      for (const depositId of depositIds.slice(1)) expect(served.indexOf(depositId)).toBeLessThan(depositIds.length);
    };
    fc.assert(fc.property(deposits, fc.integer({ min: 1, max: 30 }), holds));
  });
});
