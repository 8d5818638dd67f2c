import pino, { type DestinationStream, type Logger } from 'pino';

export type Log = Logger;

/** Structured log: one JSON object a line, UTC time, level in words. */
export function createLog(level: string, destination?: DestinationStream): Log {
  const options = {
    level,
    base: null,
    timestamp: pino.stdTimeFunctions.isoTime,
    formatters: { level: (label: string) => ({ level: label }) },
  };
  return destination ? pino(options, destination) : pino(options);
}
