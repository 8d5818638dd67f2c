import type { Page } from 'playwright-core';
import * as z from 'zod';
import { untilSettled } from './journey-browser.ts';
import { ask, openStage } from './journey-steps.ts';

/** Longest a job of the demonstration's size may take on a busy machine. */
export const JOB_LIMIT_MS = 180_000;

export const depositInHand = (page: Page): number => Number(/\/deposits\/(\d+)/.exec(page.url())?.[1]);

/** Lays files in the drop area of Intake and loads all of them as guessed. */
export async function loadFiles(page: Page, paths: readonly string[]): Promise<void> {
  await page.getByLabel('Drop CSV files here').setInputFiles([...paths]);
  const words = paths.length === 1 ? 'Load it as guessed' : `Load all ${paths.length} as guessed`;
  const load = page.getByRole('button', { name: words });
  await load.waitFor({ timeout: JOB_LIMIT_MS });
  await page.waitForFunction((name) => [...document.querySelectorAll('button')].some((button) => button.textContent.trim() === name && button.getAttribute('aria-disabled') !== 'true'), words);
  await load.click();
  const all = paths.length === 1 ? '1 of 1 file loaded' : `${paths.length} of ${paths.length} files loaded`;
  await page.getByText(all).first().waitFor({ timeout: JOB_LIMIT_MS });
  await untilAssembled(page);
}

const Snapshots = z.looseObject({ snapshot: z.unknown().nullable() });
const Jobs = z.array(z.looseObject({ kind: z.string(), state: z.string() }));

/** The tables are put together by themselves after the last load. */
export async function untilAssembled(page: Page): Promise<void> {
  const depositId = depositInHand(page);
  const end = Date.now() + JOB_LIMIT_MS;
  for (;;) {
    const jobs = Jobs.parse(await ask(page, `/deposits/${depositId}/jobs`));
    const isAtWork = jobs.some(({ state }) => state === 'queued' || state === 'running');
    if (!isAtWork && Snapshots.parse(await ask(page, `/deposits/${depositId}/snapshot`)).snapshot) break;
    if (Date.now() > end) throw new Error(`the tables were not put together: ${JSON.stringify(jobs)}`);
    await page.waitForTimeout(300);
  }
  await page.reload();
  await untilSettled(page);
}

/** Groups by k-means with the settings proposed, but for k. */
export async function groupBy(page: Page, k: number): Promise<void> {
  await page.getByRole('button', { name: 'Group', exact: true }).click();
  const panel = page.getByRole('dialog', { name: 'Run groups' });
  await panel.getByLabel('Groups, k').fill(String(k));
  await panel.getByRole('button', { name: 'Run the groups' }).click();
  await page.getByRole('heading', { name: 'Fingerprints' }).waitFor({ timeout: JOB_LIMIT_MS });
  const stand = page.getByRole('button', { name: 'Let domains stand on it' });
  if (await stand.isVisible()) await stand.click();
  await page.getByText('domains stand on it').first().waitFor();
}

/** Accepts every group as a candidate domain of its own; the number of domains made. */
export async function acceptEachGroup(page: Page): Promise<number> {
  for (let made = 0; ; made++) {
    const accept = page.getByRole('button', { name: 'Accept groups' });
    await accept.waitFor();
    // Once every group belongs to a domain there is nothing left to accept.
    if ((await accept.getAttribute('aria-disabled')) === 'true') return made;
    await accept.click();
    const groups = page.getByRole('group', { name: 'Groups that make it' });
    await groups.waitFor();
    await groups.getByRole('checkbox', { disabled: false }).first().check();
    await page.getByLabel('Name', { exact: true }).fill(`Rock ${made + 1}`);
    await page.getByLabel('Why this is one domain').fill('One rock by its fingerprint; looked at in the core.');
    await page.getByRole('button', { name: 'Accept as candidate domain' }).click();
    await groups.waitFor({ state: 'detached' });
  }
}

/** Makes codes and reads the checksum off the page. */
export async function makeCodes(page: Page): Promise<string> {
  await page.getByRole('button', { name: 'Make codes' }).click();
  await page.getByRole('heading', { name: 'Codes 1' }).waitFor({ timeout: JOB_LIMIT_MS });
  const shown = await page.locator('code').filter({ hasText: /^[0-9a-f]{64}$/ }).textContent();
  return shown ?? '';
}

/** Chooses the analytes as a suite on the Suite page and runs components on it. */
export async function runComponents(page: Page, analytes: readonly string[], support: 'Drill intervals' | 'Surface samples'): Promise<void> {
  await openStage(page, 'Suite');
  const choice = page.getByRole('radio', { name: support });
  if (await choice.isVisible()) await choice.check();
  await page.getByRole('button', { name: 'Clear', exact: true }).click();
  const table = page.getByRole('table', { name: 'Analytes of the snapshot' });
  for (const analyte of analytes) await table.getByRole('checkbox', { name: `Take ${analyte}`, exact: true }).check();
  await page.getByRole('button', { name: 'Make the suite' }).click();
  await page.getByRole('link', { name: 'Find its components' }).click();
  await page.getByRole('heading', { level: 1, name: 'Components' }).waitFor();
  await page.getByRole('button', { name: 'Run', exact: true }).click();
  await page.getByRole('dialog', { name: 'Run components' }).getByRole('button', { name: 'Run components' }).click();
  await page.getByRole('heading', { name: 'What went in' }).waitFor({ timeout: JOB_LIMIT_MS });
}
