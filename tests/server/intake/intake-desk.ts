import * as z from 'zod';
import { type FileMapping, listProblems, listRevisions, saveMapping, type Revision, type RowProblem, type Upload, uploadFiles } from '#contract/files.ts';
import { Job, JobStarted } from '#contract/jobs.ts';
import { Problem } from '#contract/problem.ts';
import { getTable } from '#contract/tables.ts';
import type { TestClient } from '#tests/support/test-client.ts';

const POLL_MS = 40;
const pause = () => new Promise((resolve) => setTimeout(resolve, POLL_MS));

/** Lines of a CSV file as its text. */
export const csv = (...lines: string[]): string => lines.map((line) => `${line}\n`).join('');

/** Two holes of 50 m; every table of the tests speaks of them. */
export const COLLARS = csv('HoleID,Easting,Northing,Elevation,Length', 'TH-1,1000,2000,300,50', 'TH-2,1050,2000,300,50');

export type SentFile = readonly [name: string, content: string | Uint8Array];

/** Intake of one deposit as its lead, by the requests the client sends. */
export function intakeDesk(client: TestClient, depositId = client.depositId) {
  const lead = client.as('lead');
  const base = `/api/deposits/${depositId}`;

  const send = (...files: SentFile[]) =>
    files.reduce((sent, [name, content]) => sent.attach('files', Buffer.from(content), name), lead.post(`${base}/uploads`));

  async function receive(...files: SentFile[]) {
    return uploadFiles.response.parse((await send(...files).expect(201)).body);
  }

  async function upload(name: string, content: string | Uint8Array): Promise<Upload> {
    const { uploads, refused } = await receive([name, content]);
    const [made] = uploads;
    if (!made) throw new Error(`upload of ${name} was refused: ${refused[0]?.message ?? ''}`);
    return made;
  }

  /** The job a request started, once it has ended. */
  async function ended(res: { status: number; body: unknown; text: string }): Promise<Job> {
    if (res.status !== 202) throw new Error(`expected a job, found ${res.status} ${res.text}`);
    const { job } = JobStarted.parse(res.body);
    for (;;) {
      const now = Job.parse((await lead.get(`${base}/jobs/${job.id}`).expect(200)).body);
      if (now.endedAt !== null) return now;
      await pause();
    }
  }

  const at = (uploadId: number) => `${base}/uploads/${uploadId}`;
  const get = async (uploadId: number): Promise<Upload> => saveMapping.response.parse((await lead.get(at(uploadId)).expect(200)).body);
  const problems = async (uploadId: number): Promise<RowProblem[]> =>
    listProblems.response.parse((await lead.get(`${at(uploadId)}/problems?pageSize=200`).expect(200)).body).rows;

  return {
    depositId, lead, base, at, send, receive, upload, ended, get, problems,

    map: (uploadId: number, mapping: unknown) => lead.put(`${at(uploadId)}/mapping`).send(mapping as object),
    check: async (uploadId: number): Promise<Job> => ended(await lead.post(`${at(uploadId)}/check`)),
    load: async (uploadId: number, mode: 'replace' | 'add' = 'replace'): Promise<Job> => ended(await lead.post(`${at(uploadId)}/load`).send({ mode })),
    revisions: async (): Promise<Revision[]> => listRevisions.response.parse((await lead.get(`${base}/revisions`).expect(200)).body),

    /** Uploads a table, reads it with the mapping as guessed (or changed) and checks every row. */
    async checked(name: string, content: string | Uint8Array, change: (mapping: FileMapping) => FileMapping = (same) => same) {
      const { id, mapping } = await upload(name, content);
      await lead.put(`${at(id)}/mapping`).send(change(mapping)).expect(200);
      const job = await ended(await lead.post(`${at(id)}/check`));
      if (job.state !== 'done') throw new Error(`the check ended ${job.state}: ${job.error?.message ?? ''}`);
      const { check } = await get(id);
      if (check === null) throw new Error('the check left no result');
      return { id, check, problems: await problems(id) };
    },

    /** Values of a number column of a loaded table. */
    async numbers(tableId: number, column: string): Promise<number[]> {
      const res = await lead.get(`${base}/tables/${tableId}/columns/${encodeURIComponent(column)}`).buffer(true).parse((stream, done) => {
        const parts: Buffer[] = [];
        stream.on('data', (part: Buffer) => parts.push(part));
        stream.on('end', () => done(null, Buffer.concat(parts)));
      }).expect(200);
      const bytes = z.instanceof(Buffer).parse(res.body);
      return [...new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))];
    },

    async rowsOf(tableId: number): Promise<number> {
      return getTable.response.parse((await lead.get(`${base}/tables/${tableId}`).expect(200)).body).nRows;
    },

    /** The bytes kept of an upload. */
    async bytesOf(uploadId: number): Promise<Buffer> {
      const res = await lead.get(`${at(uploadId)}/file`).buffer(true).expect(200);
      return Buffer.isBuffer(res.body) ? res.body : Buffer.from(res.text);
    },

    /** A refusal: its status and the problem document. */
    refusal(res: { status: number; body: unknown }): Problem & { answered: number } {
      return { ...Problem.parse(res.body), answered: res.status };
    },

    /** The server goes on answering, and holds nothing half received. */
    async stillAnswers(): Promise<void> {
      await lead.get(`${base}/uploads`).expect(200);
      await lead.get('/api/health').expect(200);
    },
  };
}
export type IntakeDesk = ReturnType<typeof intakeDesk>;
