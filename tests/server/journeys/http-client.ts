import type * as z from 'zod';
import type { Endpoint } from '#contract/endpoint.ts';
import { createDeposit, createToken, type DepositBodyInput } from '#contract/deposits.ts';
import { loadFile, uploadFiles, type Upload } from '#contract/files.ts';
import { getJob, listJobs, type Job, type JobStarted } from '#contract/jobs.ts';
import type { TokenRight } from '#contract/roles.ts';
import { getSnapshot, type Snapshot } from '#contract/snapshots.ts';
import { pathOf } from '#tests/support/calls.ts';
import type { TestClient } from '#tests/support/test-client.ts';

export interface Given {
  params?: Readonly<Record<string, string | number>>;
  query?: Readonly<Record<string, string>>;
  body?: unknown;
  headers?: Readonly<Record<string, string>>;
}

export interface TableFile {
  name: string;
  content: string | Uint8Array<ArrayBuffer>;
  mode?: 'replace' | 'add';
}

type Sendable = Pick<Endpoint, 'path' | 'method' | 'status'>;
type Starting = Sendable & { response: z.ZodType<JobStarted> };

const POLL_MS = 60;
const pause = () => new Promise((resolve) => setTimeout(resolve, POLL_MS));

/** A program on one deposit: plain HTTP with its headers, every answer read by the contract. */
export function httpClient(url: string, depositId: number, headers: Readonly<Record<string, string>>) {
  function send(endpoint: Sendable, { params, query, body, headers: own }: Given = {}): Promise<Response> {
    const search = query ? `?${new URLSearchParams(query).toString()}` : '';
    return fetch(url + pathOf(endpoint, { depositId, ...params }) + search, {
      method: endpoint.method.toUpperCase(),
      headers: { ...(body !== undefined && { 'Content-Type': 'application/json' }), ...headers, ...own },
      ...(body !== undefined && { body: JSON.stringify(body) }),
    });
  }

  /** The answer's body; throws with the server's own words when the status is not the promised one. */
  async function call<Answered extends z.ZodType>(endpoint: Sendable & { response: Answered }, given: Given = {}): Promise<z.output<Answered>> {
    const res = await send(endpoint, given);
    const text = await res.text();
    if (res.status !== endpoint.status) throw new Error(`${endpoint.method} ${endpoint.path}: ${res.status} ${text}`);
    return endpoint.response.parse(JSON.parse(text));
  }

  async function finished(jobId: number): Promise<Job> {
    for (;;) {
      const job = await call(getJob, { params: { jobId } });
      if (job.endedAt !== null) return job;
      await pause();
    }
  }

  async function done(started: JobStarted): Promise<Job> {
    const job = await finished(started.job.id);
    if (job.state !== 'done') throw new Error(`“${job.title}” ended ${job.state}: ${job.error?.message ?? ''}`);
    return job;
  }

  function sendFiles(files: readonly TableFile[]): Promise<Response> {
    const form = new FormData();
    for (const { name, content } of files) form.append('files', new Blob([content]), name);
    return fetch(url + pathOf(uploadFiles, { depositId }), { method: 'POST', headers, body: form });
  }

  async function upload(file: TableFile): Promise<Upload> {
    const res = await sendFiles([file]);
    const text = await res.text();
    if (res.status !== 201) throw new Error(`upload of ${file.name}: ${res.status} ${text}`);
    const { uploads, refused } = uploadFiles.response.parse(JSON.parse(text));
    const [made] = uploads;
    if (!made) throw new Error(`upload of ${file.name} was refused: ${refused[0]?.message ?? ''}`);
    return made;
  }

  /** The current snapshot, once every load has been put together. */
  async function snapshot(): Promise<Snapshot> {
    for (;;) {
      const { snapshot: latest } = await call(getSnapshot);
      if (latest?.isCurrent) return latest;
      const failed = (await call(listJobs)).find(({ kind, state }) => kind === 'assemble' && state === 'failed');
      if (failed) throw new Error(`“${failed.title}” failed: ${failed.error?.message ?? ''}`);
      await pause();
    }
  }

  const load = (uploadId: number, mode: 'replace' | 'add' = 'replace') => call(loadFile, { params: { uploadId }, body: { mode } });

  return {
    depositId, send, call, sendFiles, upload, load, snapshot, done, finished,

    /** Starts a job and answers the id of what it made. */
    made: async (endpoint: Starting, given: Given = {}): Promise<number> => Number((await done(await call(endpoint, given))).result?.id),

    /** Uploads and loads tables as guessed, in their order; waits for them to be put together. */
    async bringIn(files: readonly TableFile[]): Promise<Snapshot> {
      const waiting = [];
      for (const file of files) waiting.push({ id: (await upload(file)).id, mode: file.mode });
      const started = [];
      for (const { id, mode } of waiting) started.push(await load(id, mode));
      for (const job of started) await done(job);
      return snapshot();
    },
  };
}
export type HttpClient = ReturnType<typeof httpClient>;

/** A new deposit made by a signed-in person, and a program with a token of theirs on it. */
export async function newDeposit(client: TestClient, body: DepositBodyInput, right: TokenRight = 'work'): Promise<HttpClient> {
  const lead = client.as('lead');
  const made = createDeposit.response.parse((await lead.post('/api/deposits').send(body)).body);
  const token = await lead.post(`/api/deposits/${made.id}/tokens`).send({ name: 'Journey', right, days: 1 });
  const { text } = createToken.response.parse(token.body);
  return httpClient(client.url, made.id, { Authorization: `Bearer ${text}` });
}
