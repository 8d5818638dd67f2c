import fc from 'fast-check';
import { describe, expect, it, test } from 'vitest';
import { createEvents, type NumberedEvent } from '#server/modules/jobs/events.ts';

const resourcesOf = (events: readonly NumberedEvent[] | null): string[] | null =>
  events && events.map(({ event }) => (event.type === 'changed' ? event.resource : 'job'));

describe('events of a deposit', () => {
  it('reach its listeners in order, and nobody else', () => {
    const events = createEvents();
    const heard: NumberedEvent[] = [];
    const stop = events.subscribe(1, (event) => heard.push(event));
    events.changed(1, 'domains');
    events.changed(2, 'groupings');
    events.changed(1, 'screens');
    stop();
    events.changed(1, 'suites');
    expect(resourcesOf(heard)).toEqual(['domains', 'screens']);
    expect(new Set(heard.map(({ id }) => id)).size).toBe(2);
  });

  test('JO-07 whatever was missed is told once, or said to be lost', () => {
    const holds = (before: number, after: number): void => {
      const events = createEvents();
      for (let n = 0; n < before; n++) events.changed(1, `before ${n}`);
      const lastSeen = events.headOf(1);
      for (let n = 0; n < after; n++) events.changed(1, `after ${n}`);
      const expected = after <= 256 ? Array.from({ length: after }, (_, n) => `after ${n}`) : null;
      expect(resourcesOf(events.since(1, lastSeen))).toEqual(expected);
    };
    fc.assert(fc.property(fc.nat(600), fc.nat(300), holds));
  });

  it.each(['', 'nonsense', '00000000-1', '-1'])('knows nothing after the id %j', (lastId) => {
    const events = createEvents();
    events.changed(1, 'domains');
    expect(events.since(1, lastId)).toBeNull();
  });

  it('takes no id of another run of the server, nor one to come', () => {
    const [earlier, now] = [createEvents(), createEvents()];
    earlier.changed(1, 'domains');
    now.changed(1, 'domains');
    expect(now.since(1, earlier.headOf(1))).toBeNull();
    expect(now.since(1, `${now.headOf(1)}0`)).toBeNull();
    expect(now.since(1, now.headOf(1))).toEqual([]);
  });
});
