import { readFile, stat, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import * as z from 'zod';
import type { DemoFile } from '#contract/files.ts';
import { TABLE_KINDS } from '#contract/files.ts';
import type { Role } from '#contract/roles.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { Demo } from '#server/modules/admin/demo.ts';
import type { AppDeps, Services } from '#server/services.ts';
import type { MadeDemo, MakeDemoInput } from '#workers/tasks/make-demo.ts';
import { firstPass } from './first-pass.ts';
import { loadDemo } from './load-demo.ts';
import { DEMO_SIGN_INS, ensurePeople } from './people.ts';

export interface DemoInstance extends Demo {
  /** Fills an empty instance; does nothing on one that is filled. */
  seed(services: Services): Promise<void>;
  files(): Promise<DemoFile[]>;
  /** Path of one demonstration table. */
  file(name: string): Promise<string>;
}

const PRACTICE_NAME = 'Practice ground';
const Kept = z.array(z.object({ name: z.string(), kind: z.enum(TABLE_KINDS), mode: z.enum(['replace', 'add']), rows: z.number(), sizeBytes: z.number() }));

type Deps = Pick<AppDeps, 'env' | 'db' | 'clock' | 'compute' | 'hasher' | 'log'>;

/** The demonstration instance: invented people, an invented deposit with a finished first pass, an empty one to try intake on. */
export function createDemo({ env, db, clock, compute, hasher, log }: Deps, print: (line: string) => void): DemoInstance {
  const folder = join(env.paths.root, 'demo');
  const listFile = join(folder, 'files.json');
  let services: Services | null = null;
  let isBusy = false;

  async function makeTables(): Promise<MadeDemo> {
    return compute.run<MakeDemoInput, MadeDemo>('make-demo', { folder });
  }

  async function createDeposits({ deposits }: Services, demo: MadeDemo, people: ReadonlyMap<Role, Actor>): Promise<number> {
    const lead = orNotFound(people.get('lead'), 'lead');
    const { description, grid, payAnalytes, deleteriousAnalytes } = demo;
    const made = await deposits.create({ name: demo.name, description, grid, payAnalytes, deleteriousAnalytes }, lead);
    const practice = await deposits.create({ name: PRACTICE_NAME, description: 'Empty: download the demonstration tables and bring them in by hand.', grid, payAnalytes, deleteriousAnalytes }, lead);
    await db('deposits').whereIn('id', [made.id, practice.id]).update({ is_demo: 1 });
    const since = clock().toISOString();
    const others = [...people].filter(([role]) => role !== 'lead');
    await db('memberships').insert([made.id, practice.id].flatMap((deposit_id) => others.map(([role, { id }]) => ({ deposit_id, user_id: id, role, since }))));
    return made.id;
  }

  async function fill(target: Services): Promise<void> {
    const startedAt = performance.now();
    const say = (line: string): void => print(`  ${((performance.now() - startedAt) / 1000).toFixed(1).padStart(5)} s  ${line}`);
    print('Preparing the demonstration deposit (once):');
    say('invented tables');
    const demo = await makeTables();
    const people = await ensurePeople(db, hasher, clock);
    const depositId = await createDeposits(target, demo, people);
    const geologist = orNotFound(people.get('geologist'), 'geologist');
    say(`intake of ${demo.files.length} tables`);
    await loadDemo(target.analysis, depositId, demo, env.paths.incoming, geologist);
    await firstPass(target.analysis, depositId, demo, geologist, say);
    await keepList(demo);
    say('done');
  }

  async function keepList({ files }: MadeDemo): Promise<void> {
    await writeFile(listFile, JSON.stringify(files.map(({ fileName, kind, mode, rows, sizeBytes }) => ({ name: fileName, kind, mode, rows, sizeBytes }))));
  }

  const isFilled = async (): Promise<boolean> => (await db('deposits').where({ is_demo: 1 }).first('id')) !== undefined;

  async function files(): Promise<DemoFile[]> {
    return Kept.parse(JSON.parse(await readFile(listFile, 'utf8').catch(() => '[]')));
  }

  return {
    signIns: DEMO_SIGN_INS,
    files,

    async seed(target) {
      services = target;
      if (!(await isFilled())) await fill(target);
    },

    async file(name) {
      const known = (await files()).find((file) => file.name === name);
      const path = join(folder, orNotFound(known, 'demonstration table').name);
      await stat(path);
      return path;
    },

    async reset() {
      if (!services) throw new AppError(503, 'not-ready', 'The demonstration is not ready yet.');
      if (isBusy) throw new AppError(409, 'reset-running', 'The demonstration is being reset already.');
      isBusy = true;
      try {
        await db('deposits').where({ is_demo: 1 }).delete();
        await fill(services);
      } catch (error) {
        log.error({ event: 'demo-reset-failed', err: error }, 'the demonstration could not be reset');
        throw error;
      } finally {
        isBusy = false;
      }
    },
  };
}
