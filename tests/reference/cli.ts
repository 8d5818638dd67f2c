import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import * as z from 'zod';
import {
  readReference,
  REFERENCE_FOLDER,
  referenceNames,
  type ReferenceSet,
} from '#tests/support/reference.ts';
import { outcomeLine, runChecks } from './run-checks.ts';

/**
 * Runs every check of every reference set of a folder (layout `reference-values/1`, see the README of
 * tests/fixtures/reference): `npm run reference -- FOLDER`, by default the folder of the project.
 * Prints a line for each check that falls short and ends with code 1 when there is any.
 */
function main(folder: string): void {
  const totals = { passed: 0, failed: 0, information: 0 };
  const fail = (words: string) => {
    totals.failed += 1;
    console.log(`FAILED ${words}`);
  };
  const names = existsSync(folder) ? referenceNames(folder) : [];
  if (names.length === 0) fail(`expected reference sets (*.json) in ${folder}, found none`);
  for (const name of names) {
    const set = setOf(folder, name);
    if (typeof set === 'string') {
      fail(`${name}.json: ${set}`);
      continue;
    }
    for (const { id, message } of set.unreadable) fail(`${id}: not in the layout: ${message}`);
    for (const outcome of runChecks(set)) {
      if (outcome.verdict === 'failed') {
        fail(outcomeLine(outcome));
        continue;
      }
      totals[outcome.verdict] += 1;
      if (outcome.verdict === 'information') console.log(`INFORMATION ${outcomeLine(outcome)}`);
    }
  }
  if (totals.information > 0)
    console.log(`${totals.information} computed for information: fragile or collapsed, no target`);
  console.log(`${totals.passed} passed, ${totals.failed} failed`);
  process.exitCode = totals.failed > 0 ? 1 : 0;
}

/** A set, or why it cannot be read. */
function setOf(folder: string, name: string): ReferenceSet | string {
  try {
    return readReference(folder, name);
  } catch (error) {
    if (error instanceof z.ZodError) return z.prettifyError(error).replaceAll('\n', ' ');
    return error instanceof Error ? error.message : String(error);
  }
}

main(resolve(process.argv[2] ?? REFERENCE_FOLDER));
