import { readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Knex } from 'knex';

const STEM = /(?<!\.d)\.[jt]s$/;

const isMigration = (value: unknown): value is Knex.Migration =>
  typeof value === 'object' && value !== null && 'up' in value && typeof value.up === 'function';

/**
 * Migrations named by their file's stem, so that a database migrated from the sources and one
 * migrated by the build agree.
 */
export class StemMigrationSource implements Knex.MigrationSource<string> {
  private readonly folder: string;

  constructor(folder: string) {
    this.folder = folder;
  }

  async getMigrations(): Promise<string[]> {
    return (await readdir(this.folder)).filter((file) => STEM.test(file)).sort();
  }

  getMigrationName(file: string): string {
    return file.replace(STEM, '');
  }

  async getMigration(file: string): Promise<Knex.Migration> {
    const found: unknown = await import(
      /* @vite-ignore */ pathToFileURL(join(this.folder, file)).href
    );
    if (!isMigration(found)) throw new Error(`migration ${file}: expected an exported function up`);
    return found;
  }
}
