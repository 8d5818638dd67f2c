import { resolve } from 'node:path';
import * as z from 'zod';
import { readReference, REFERENCE_FOLDER, referenceNames } from '#tests/support/reference.ts';
import { outcomeLine, runChecks, type CheckOutcome } from './run-checks.ts';

/**
 * Runs every check of every reference set of a folder (layout `reference-values/1`, see the README of
 * tests/fixtures/reference): `npm run reference -- FOLDER`, by default the folder of the project. Prints a
 * line for each check that falls short and ends with code 1 when there is any.
 */
function main(folder: string): void {
  const names = referenceNames(folder);
  if (names.length === 0) {
    console.error(`expected reference sets (*.json) in ${folder}, found none`);
    process.exitCode = 1;
    return;
  }
  const totals = { passed: 0, failed: 0, information: 0 };
  for (const name of names) {
    const outcomes = outcomesOf(name, folder);
    if (typeof outcomes === 'string') {
      totals.failed += 1;
      console.log(`FAILED ${name}.json: ${outcomes}`);
      continue;
    }
    for (const outcome of outcomes) {
      totals[outcome.verdict] += 1;
      if (outcome.verdict === 'failed') console.log(`FAILED ${outcomeLine(outcome)}`);
      if (outcome.verdict === 'information') console.log(`INFORMATION ${outcomeLine(outcome)}`);
    }
  }
  if (totals.information > 0)
    console.log(
      `${totals.information} computed for information: marked fragile or collapsed, no target`,
    );
  console.log(`${totals.passed} passed, ${totals.failed} failed`);
  process.exitCode = totals.failed > 0 ? 1 : 0;
}

/** Outcomes of a set, or why it cannot be read. */
function outcomesOf(name: string, folder: string): CheckOutcome[] | string {
  try {
    return runChecks(readReference(folder, name));
  } catch (error) {
    if (error instanceof z.ZodError) return z.prettifyError(error).replaceAll('\n', ' ');
    return error instanceof Error ? error.message : String(error);
  }
}

main(resolve(process.argv[2] ?? REFERENCE_FOLDER));
