import type { Knex } from 'knex';
import { RateLimiterRes, RateLimiterSQLite } from 'rate-limiter-flexible';
import { DAY_MS, HOUR_MS, MINUTE_MS, SECOND_MS } from '#server/lib/clock.ts';
import { AppError } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import { sha256Hex } from '#server/lib/secrets.ts';

const WINDOW_S = (15 * MINUTE_MS) / SECOND_MS;
const DAY_S = DAY_MS / SECOND_MS;
const PER_ACCOUNT_AND_ADDRESS = 5;
const PER_ADDRESS = 50;
const MAILS_PER_ACCOUNT = 5;
const MAILS_PER_ADDRESS = 30;

export interface Throttle {
  /**
   * Counts a try of a password before it is made; `succeeded` takes it back. The wait doubles each
   * time the limit is reached again within a day. An owner at another address is not locked out.
   *
   * @throws {AppError} 429 with the seconds to wait.
   */
  beginTry(account: string, address: string): Promise<{ succeeded(): Promise<void> }>;
  /** Whether one more e-mail may go to this account at the wish of this address. */
  mayMail(account: string, address: string): Promise<boolean>;
}

type Taken = { ok: true } | { ok: false; waitMs: number; isFirst: boolean };

/** Takes one point; a full limit is an answer here, not an exception. */
async function take(limiter: RateLimiterSQLite, key: string, points: number): Promise<Taken> {
  try {
    await limiter.consume(key);
    return { ok: true };
  } catch (refused) {
    if (!(refused instanceof RateLimiterRes)) throw refused;
    return {
      ok: false,
      waitMs: refused.msBeforeNext,
      isFirst: refused.consumedPoints === points + 1,
    };
  }
}

export function createThrottle(db: Knex, log: Log): Throttle {
  const limiter = (keyPrefix: string, points: number, duration: number) =>
    new RateLimiterSQLite({
      storeClient: db,
      storeType: 'knex',
      tableName: 'throttles',
      tableCreated: true,
      keyPrefix,
      points,
      duration,
    });
  const tries = limiter('try', PER_ACCOUNT_AND_ADDRESS, WINDOW_S);
  const triesOfAddress = limiter('try-address', PER_ADDRESS, WINDOW_S);
  const blocks = limiter('block', Number.MAX_SAFE_INTEGER, DAY_S);
  const mails = limiter('mail', MAILS_PER_ACCOUNT, HOUR_MS / SECOND_MS);
  const mailsOfAddress = limiter('mail-address', MAILS_PER_ADDRESS, HOUR_MS / SECOND_MS);

  async function refuse(
    limited: RateLimiterSQLite,
    key: string,
    taken: Extract<Taken, { ok: false }>,
  ): Promise<never> {
    let waitS = taken.waitMs / SECOND_MS;
    if (taken.isFirst) {
      const { consumedPoints: blockNumber } = await blocks.consume(`${limited.keyPrefix}:${key}`);
      waitS = Math.min(WINDOW_S * 2 ** (blockNumber - 1), DAY_S);
      await limited.block(key, waitS);
    }
    log.warn(
      { event: 'throttled', limit: limited.keyPrefix, waitS: Math.ceil(waitS) },
      'throttled',
    );
    throw new AppError(
      429,
      'too-many-tries',
      `Too many failed tries. Wait ${Math.ceil(waitS / 60)} minutes, then try again.`,
      { retryAfterS: waitS },
    );
  }

  return {
    async beginTry(account, address) {
      const key = sha256Hex(JSON.stringify([account, address]));
      const taken = await take(tries, key, PER_ACCOUNT_AND_ADDRESS);
      if (!taken.ok) return refuse(tries, key, taken);
      const takenOfAddress = await take(triesOfAddress, address, PER_ADDRESS);
      if (!takenOfAddress.ok) return refuse(triesOfAddress, address, takenOfAddress);
      return {
        async succeeded() {
          await tries.delete(key);
          await triesOfAddress.reward(address);
        },
      };
    },
    async mayMail(account, address) {
      const ofAddress = await take(mailsOfAddress, address, MAILS_PER_ADDRESS);
      if (!ofAddress.ok) return false;
      return (await take(mails, sha256Hex(account), MAILS_PER_ACCOUNT)).ok;
    },
  };
}
