import { randomBytes } from 'node:crypto';
import type { DepositEvent } from '#contract/jobs.ts';

export interface NumberedEvent {
  /** `<run of the server>-<number>`: an id of an earlier run is never mistaken for one of this. */
  id: string;
  event: DepositEvent;
}

type Listener = (numbered: NumberedEvent) => void;

interface Channel {
  lastNumber: number;
  ring: NumberedEvent[];
  listeners: Set<Listener>;
}

export interface Events {
  publish(depositId: number, event: DepositEvent): void;
  /** Tells who is looking at the deposit that a resource changed: its path part, such as `domains`. */
  changed(depositId: number, resource: string): void;
  /** Hears every event from now on, until the returned function is called. */
  subscribe(depositId: number, listener: Listener): () => void;
  /** What came after `lastId`; null when that is no longer known, so that all must be read again. */
  since(depositId: number, lastId: string): NumberedEvent[] | null;
  /** Id of the latest event. */
  headOf(depositId: number): string;
}

const RING_SIZE = 256;

/** Events of each deposit, numbered, the latest kept in memory for streams that were cut. */
export function createEvents(): Events {
  const runId = randomBytes(4).toString('hex');
  const channels = new Map<number, Channel>();

  function channelOf(depositId: number): Channel {
    const channel = channels.get(depositId) ?? { lastNumber: 0, ring: [], listeners: new Set() };
    channels.set(depositId, channel);
    return channel;
  }

  function publish(depositId: number, event: DepositEvent): void {
    const channel = channelOf(depositId);
    channel.lastNumber += 1;
    const numbered = { id: `${runId}-${channel.lastNumber}`, event };
    channel.ring.push(numbered);
    if (channel.ring.length > RING_SIZE) channel.ring.shift();
    for (const listener of channel.listeners) listener(numbered);
  }

  return {
    publish,
    changed: (depositId, resource) => publish(depositId, { type: 'changed', resource }),
    subscribe(depositId, listener) {
      const { listeners } = channelOf(depositId);
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    since(depositId, lastId) {
      const { lastNumber, ring } = channelOf(depositId);
      const match = /^([0-9a-f]{8})-(\d{1,15})$/.exec(lastId);
      const seen = Number(match?.[2]);
      const isKnown = match?.[1] === runId && seen <= lastNumber && seen >= lastNumber - ring.length;
      return isKnown ? ring.slice(ring.length - (lastNumber - seen)) : null;
    },
    headOf: (depositId) => `${runId}-${channelOf(depositId).lastNumber}`,
  };
}
