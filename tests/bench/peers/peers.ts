import { spawn, spawnSync, type ChildProcessWithoutNullStreams } from 'node:child_process';
import { closeSync, mkdtempSync, openSync, rmSync, writeSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface, type Interface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import * as z from 'zod';

const ONE_THREAD = { OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1', MKL_NUM_THREADS: '1' };
const here = (file: string): string => fileURLToPath(new URL(file, import.meta.url));
const runs = (command: string, args: string[]): boolean => spawnSync(command, args, { stdio: 'ignore' }).status === 0;

/** A Python with the module, Debian's first; null when there is none. */
function pythonWith(module: string): string | null {
  return ['/usr/bin/python3', 'python3'].find((command) => runs(command, ['-c', `import ${module}`])) ?? null;
}

/** Columns as a file of doubles, one after the other. */
export function writeColumns(columns: readonly Float64Array[]): { file: string; remove: () => void } {
  const folder = mkdtempSync(join(tmpdir(), 'selvage-bench-'));
  const file = join(folder, 'columns.bin');
  const out = openSync(file, 'w');
  for (const column of columns) writeSync(out, Buffer.from(Float64Array.from(column).buffer));
  closeSync(out);
  return { file, remove: () => rmSync(folder, { recursive: true, force: true }) };
}

const Answer = z.object({ ms: z.number(), value: z.number().nullable() });
export type PeerAnswer = z.infer<typeof Answer>;

export interface Peer {
  run(request: Readonly<Record<string, unknown>>): Promise<PeerAnswer>;
  close(): void;
}

/** A Python process that times itself; null without the module. */
export function pythonPeer(module: 'numpy' | 'sklearn'): Peer | null {
  const python = pythonWith(module);
  if (python === null) return null;
  const child: ChildProcessWithoutNullStreams = spawn(python, [here('peer.py')], { env: { ...process.env, ...ONE_THREAD } });
  child.stderr.pipe(process.stderr);
  const lines: Interface = createInterface(child.stdout);
  const answers = lines[Symbol.asyncIterator]();
  return {
    async run(request) {
      child.stdin.write(`${JSON.stringify(request)}\n`);
      const { value, done } = await answers.next();
      if (done) throw new Error('the Python peer ended');
      return Answer.parse(JSON.parse(value));
    },
    close: () => void child.stdin.end(),
  };
}

/** Milliseconds R's diptest takes for the dip of every column; null without R and the package. */
export function dipByR(file: string, columns: number): number | null {
  if (!runs('Rscript', ['-e', 'library(diptest)'])) return null;
  const { stdout } = spawnSync('Rscript', [here('dip.R'), file, String(columns)], { encoding: 'utf8' });
  return Number(stdout);
}
