import { EventEmitter } from 'node:events';
import type { Response } from 'express';
import { afterAll, beforeAll, describe, expect, it, test, vi } from 'vitest';
import { streamDeposit } from '#server/modules/jobs/event-stream.ts';
import { createEvents, type Events } from '#server/modules/jobs/events.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';
import { readEvents, type ReadEvent } from './event-reader.ts';
import { until } from './job-harness.ts';

let client: TestClient;
let events: Events;
let jobId: number;

async function insertJob(state: string, depositId = client.depositId): Promise<number> {
  const [id] = await client.db('jobs').insert({
    deposit_id: depositId, kind: 'grouping', title: 'Group 8,412 intervals into 6', params: '{"k":6}', state,
    started_by: client.of('geologist').id, created_at: '2026-01-05T10:00:00.000Z',
  });
  if (id === undefined) throw new Error('no job was made');
  return id;
}

beforeAll(async () => {
  client = await testClient();
  events = client.app.services.analysis.events;
  jobId = await insertJob('done');
});
afterAll(() => client.close());

const jobs = (depositId = client.depositId): string => `/api/deposits/${depositId}/jobs`;

describe('reading jobs', () => {
  it('lists the latest first, with nothing but the contract’s fields', async () => {
    const later = await insertJob('failed');
    const res = await client.as('viewer').get(jobs());
    expect(res.status).toBe(200);
    expect(res.body.map(({ id }: { id: number }) => id)).toEqual([later, jobId]);
    expect(res.body[1]).toEqual({
      id: jobId, depositId: client.depositId, kind: 'grouping', title: 'Group 8,412 intervals into 6', state: 'done', progress: 0,
      phase: '', error: null, result: null, startedBy: { id: client.of('geologist').id, name: 'Test geologist' },
      createdAt: '2026-01-05T10:00:00.000Z', startedAt: null, endedAt: null,
    });
    expect((await client.as('viewer').get(`${jobs()}/${jobId}`)).body).toEqual(res.body[1]);
  });

  it('AZ-02 knows no job of another deposit', async () => {
    const foreign = await insertJob('queued', client.otherDepositId);
    for (const id of [foreign, 99_999]) {
      const [read, cancel] = [client.as('lead').get(`${jobs()}/${id}`), client.as('lead').post(`${jobs()}/${id}/cancel`)];
      for (const res of await Promise.all([read, cancel])) {
        expect([res.status, res.body.code, res.body.detail]).toEqual([404, 'no-such-job', 'There is no such job here.']);
      }
    }
  });
});

describe('cancelling', () => {
  it.each([
    [401, null],
    [404, 'outsider'],
    [403, 'viewer'],
    [403, 'estimator'],
    [200, 'geologist'],
    [200, 'lead'],
  ] as const)('answers %i to %s', async (status, who) => {
    const id = await insertJob('queued');
    const res = await client.as(who).post(`${jobs()}/${id}/cancel`);
    expect(res.status).toBe(status);
    const { state } = await client.db('jobs').where({ id }).first('state');
    expect(state).toBe(status === 200 ? 'cancelled' : 'queued');
    await client.db('jobs').where({ id }).update({ state: 'cancelled' });
  });

  it('of a job that has ended answers 409', async () => {
    const res = await client.as('lead').post(`${jobs()}/${jobId}/cancel`);
    expect([res.status, res.body.code]).toEqual([409, 'job-ended']);
  });
});

const resourcesIn = (read: readonly ReadEvent[]): string[] =>
  read.flatMap(({ event }) => (event.type === 'changed' ? [event.resource] : []));

describe('JO-07 the event stream', () => {
  it('begins with the jobs as they are, then tells what happens on this deposit only', async () => {
    const reader = await readEvents(client, 'viewer');
    expect([reader.status, reader.contentType]).toEqual([200, 'text/event-stream; charset=utf-8']);
    await until(() => reader.events.some(({ event }) => event.type === 'job' && event.job.id === jobId));
    events.changed(client.otherDepositId, 'of B');
    events.changed(client.depositId, 'domains');
    await until(() => resourcesIn(reader.events).length > 0);
    expect(resourcesIn(reader.events)).toEqual(['domains']);
    reader.cut();
  });

  it('cut 20 times, tells everything once', async () => {
    const told: string[] = [];
    let lastId = events.headOf(client.depositId);
    for (let time = 0; time < 20; time++) {
      events.changed(client.depositId, `while away ${time}`);
      const reader = await readEvents(client, 'viewer', lastId);
      events.changed(client.depositId, `while here ${time}`);
      await until(() => resourcesIn(reader.events).includes(`while here ${time}`));
      told.push(...resourcesIn(reader.events));
      lastId = reader.events.at(-1)?.id ?? lastId;
      reader.cut();
    }
    const expected = Array.from({ length: 20 }, (_, time) => [`while away ${time}`, `while here ${time}`]).flat();
    expect(told).toEqual(expected);
  });

  it('begins anew after an id it does not know, and resumes from the id it then gives', async () => {
    const reader = await readEvents(client, 'viewer', 'of-another-run-1');
    await until(() => reader.events.length > 0);
    reader.cut();
    const givenId = reader.events.at(-1)?.id ?? '';
    events.changed(client.depositId, 'afterwards');
    const resumed = await readEvents(client, 'viewer', givenId);
    await until(() => resumed.events.length > 0);
    expect(resourcesIn(resumed.events)).toEqual(['afterwards']);
    expect(resumed.events).toHaveLength(1);
    resumed.cut();
  });

  it.each([[401, null], [404, 'outsider'], [404, 'administrator']] as const)('answers %i to %s', async (status, who) => {
    expect((await client.as(who).get(`/api/deposits/${client.depositId}/events`)).status).toBe(status);
  });

  test.each([
    ['AU-03 the session', 'estimator', (id: number) => client.db('sessions').where({ user_id: id }).del()],
    ['the membership', 'site-geologist', (id: number) => client.db('memberships').where({ user_id: id }).del()],
  ] as const)('%s lost ends the stream within 5 s', async (_name, who, take) => {
    const reader = await readEvents(client, who);
    expect(reader.status).toBe(200);
    const startedAt = performance.now();
    await take(client.of(who).id);
    await reader.ended;
    expect(performance.now() - startedAt).toBeLessThan(5_000);
  });
});

describe('a stream', () => {
  class FakeResponse extends EventEmitter {
    text = '';
    writableEnded = false;
    writableLength = 0;
    isDestroyed = false;
    status(): this {
      return this;
    }
    set(): this {
      return this;
    }
    write(text: string): boolean {
      this.text += text;
      return true;
    }
    destroy(): void {
      this.isDestroyed = true;
      this.emit('close');
    }
  }
  const open = async (source: Events, lastEventId?: string): Promise<FakeResponse> => {
    const res = new FakeResponse();
    await streamDeposit(res as unknown as Response, 1, { events: source, currentJobs: () => Promise.resolve([]), lastEventId });
    return res;
  };

  test('JO-07 beats every 15 s, until it closes', async () => {
    vi.useFakeTimers();
    const res = await open(createEvents());
    const beats = (): number => res.text.split(': still here').length - 1;
    vi.advanceTimersByTime(14_900);
    expect(beats()).toBe(0);
    vi.advanceTimersByTime(30_200);
    expect(beats()).toBe(3);
    res.emit('close');
    vi.advanceTimersByTime(60_000);
    expect(beats()).toBe(3);
    vi.useRealTimers();
  });

  it('lets go of a reader that falls a megabyte behind', async () => {
    const source = createEvents();
    const res = await open(source);
    res.writableLength = 2 * 1024 * 1024;
    source.changed(1, 'domains');
    expect(res.isDestroyed).toBe(true);
    const before = res.text;
    source.changed(1, 'domains');
    expect(res.text).toBe(before);
  });

  it('loses nothing that happens while the current jobs are read', async () => {
    const source = createEvents();
    const res = new FakeResponse();
    const currentJobs = () => {
      source.changed(1, 'meanwhile');
      return Promise.resolve([]);
    };
    await streamDeposit(res as unknown as Response, 1, { events: source, currentJobs, lastEventId: undefined });
    source.changed(1, 'later');
    expect([...res.text.matchAll(/"resource":"(\w+)"/g)].map(([, resource]) => resource)).toEqual(['meanwhile', 'later']);
  });
});
