import { copyFile, mkdir, rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { Actor } from '#server/lib/actor.ts';
import type { Analysis } from '#server/analysis.ts';
import type { MadeDemo } from '#workers/tasks/make-demo.ts';

/** A job of the first pass that failed: the demonstration cannot be opened half made. */
async function done(analysis: Analysis, jobId: number): Promise<void> {
  const job = await analysis.jobs.waitFor(jobId);
  if (job.state !== 'done') throw new Error(`demonstration: “${job.title}” ended ${job.state}: ${job.error?.message ?? ''}`);
}

/** Brings the tables in as a person would: upload, mapping as guessed, load; then waits for them to be put together. */
export async function loadDemo(analysis: Analysis, depositId: number, demo: MadeDemo, incomingDir: string, actor: Actor): Promise<void> {
  await mkdir(incomingDir, { recursive: true });
  const waiting: { uploadId: number; mode: 'replace' | 'add' }[] = [];
  for (const { fileName, path, sizeBytes, mode } of demo.files) {
    const copy = join(incomingDir, `demo-${fileName}`);
    await copyFile(path, copy);
    const { uploads, refused } = await analysis.intake.receive(depositId, [{ path: copy, originalname: fileName, size: sizeBytes }], actor);
    await rm(copy, { force: true });
    const [upload] = uploads;
    if (!upload) throw new Error(`demonstration: ${fileName} was refused: ${refused[0]?.message ?? ''}`);
    waiting.push({ uploadId: upload.id, mode });
  }
  // All loads are in the queue before the first ends, so the tables are put together once.
  const jobs = [];
  for (const { uploadId, mode } of waiting) jobs.push(await analysis.intake.load(depositId, uploadId, mode, actor));
  for (const { job } of jobs) await done(analysis, job.id);
  await assembled(analysis, depositId);
}

/** The job that joins the tables follows the last load by itself. */
async function assembled(analysis: Analysis, depositId: number): Promise<void> {
  const jobs = await analysis.jobs.list(depositId);
  for (const { id, kind, state } of jobs) if (kind === 'assemble' && state !== 'done') await done(analysis, id);
}

/** Starts a job and waits for what it made. */
export async function made(analysis: Analysis, started: Promise<{ job: { id: number } }>): Promise<number> {
  const { job } = await started;
  await done(analysis, job.id);
  const { result } = await analysis.jobs.waitFor(job.id);
  return Number(result?.id);
}
