/** Where the server reads the time. Tests put their own in, to reach limits of hours and days. */
export type Clock = () => Date;

export const systemClock: Clock = () => new Date();

export const SECOND_MS = 1_000;
export const MINUTE_MS = 60 * SECOND_MS;
export const HOUR_MS = 60 * MINUTE_MS;
export const DAY_MS = 24 * HOUR_MS;

/** The instant `ms` after the clock's, as stored: ISO 8601 in UTC. */
export const instantAfter = (clock: Clock, ms: number): string =>
  new Date(clock().getTime() + ms).toISOString();
