import { mkdirSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { makeDemoDeposit, type DemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { defineTask } from '#workers/task.ts';

export interface MakeDemoInput {
  /** Folder the tables are written to. */
  folder: string;
}

export interface MadeDemo extends Omit<DemoDeposit, 'files' | 'plantedProblems'> {
  files: { fileName: string; kind: DemoDeposit['files'][number]['kind']; mode: 'replace' | 'add'; path: string; sizeBytes: number; rows: number }[];
}

/** Makes the invented deposit and writes its tables as the files a team would load. */
export default defineTask<MakeDemoInput, MadeDemo>(({ folder }, { report }) => {
  report('make the demonstration deposit', 0);
  const { files, name, description, grid, payAnalytes, deleteriousAnalytes, truth, suiteAnalytes } = makeDemoDeposit();
  mkdirSync(folder, { recursive: true });
  const written = files.map(({ fileName, kind, mode, csv }) => {
    const path = join(folder, fileName);
    writeFileSync(path, csv);
    return { fileName, kind, mode, path, sizeBytes: statSync(path).size, rows: csv.trimEnd().split('\n').length - 1 };
  });
  return { name, description, grid, payAnalytes, deleteriousAnalytes, truth, suiteAnalytes, files: written };
});
