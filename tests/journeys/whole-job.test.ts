import { createHash } from 'node:crypto';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import * as z from 'zod';
import { CODE_COLUMNS } from '#contract/codes.ts';
import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { makeDemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { goTo, launchBrowser, openContext, openPage, untilSettled } from '#tests/support/journey-browser.ts';
import { acceptEachGroup, groupBy, JOB_LIMIT_MS, loadFiles, makeCodes, runComponents } from '#tests/support/journey-stages.ts';
import { depositNamed, linkMailedTo, openStage, signIn } from '#tests/support/journey-steps.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';

const NEWCOMER = { name: 'Ilse Varga', email: 'ilse.varga@demo.example', password: 'nine wet core trays drying' };
const DEPOSIT = 'Hand ground';
const DomainRow = z.object(Object.fromEntries(CODE_COLUMNS.map((column) => [column, z.string()])));

/** Agreement of codes with what the generator knows of the ground, over intervals known in both. */
function agreementWithTruth(rows: readonly Record<string, string>[]): { index: number; matched: number } {
  const { truth } = makeDemoDeposit();
  const key = (hole: string, fromM: number): string => `${hole} ${fromM.toFixed(2)}`;
  const codeOf = new Map(rows.map((row) => [key(row['hole'] ?? '', Number(row['from_m'])), row['domain'] ?? '']));
  const pairs = truth.flatMap(({ hole, fromM, domain }) => {
    const code = codeOf.get(key(hole, fromM));
    return code === undefined ? [] : [{ code, domain }];
  });
  const numbered = (names: readonly string[]): Int32Array => {
    const known = [...new Set(names)];
    return Int32Array.from(names, (name) => known.indexOf(name) + 1);
  };
  const index = adjustedRandIndex(numbered(pairs.map(({ code }) => code)), numbered(pairs.map(({ domain }) => domain)));
  return { index: index ?? NaN, matched: pairs.length / truth.length };
}

describe('a new geologist does the whole job by hand', () => {
  const folder = tempFolder();
  let browser: Browser;
  let page: Page;
  let complaints: string[];
  beforeAll(async () => {
    browser = await launchBrowser();
    ({ page, complaints } = await openPage(browser, inject('journeyUrl')));
  });
  afterAll(async () => {
    await browser.close();
    folder.remove();
  });

  it('is invited by the lead by e-mail', async () => {
    const leadPage = await (await openContext(browser, inject('journeyUrl'))).newPage();
    await signIn(leadPage);
    await goTo(leadPage, `/deposits/${await depositNamed(leadPage, 'Varrowmere')}/members`);
    await leadPage.getByLabel('E-mail').fill(NEWCOMER.email);
    await leadPage.getByRole('radio', { name: /^Geologist/ }).check();
    await leadPage.getByRole('button', { name: 'Send the invitation' }).click();
    await leadPage.getByRole('heading', { name: 'Open invitations' }).waitFor();
    await leadPage.getByText(`Invitation sent to ${NEWCOMER.email}`, { exact: true }).waitFor();
    await leadPage.context().close();
  });

  it('joins by the link in the mail and signs in', async () => {
    await page.goto(await linkMailedTo(page, NEWCOMER.email));
    await page.getByRole('heading', { level: 1, name: 'Join Varrowmere' }).waitFor();
    await page.getByText('asks you to join Varrowmere as geologist').waitFor();
    await page.getByLabel('Your name').fill(NEWCOMER.name);
    await page.getByLabel('New password').fill(NEWCOMER.password);
    await page.getByRole('button', { name: 'Join' }).click();
    await page.waitForURL(/\/deposits\/\d+$/);
    await untilSettled(page);
    await page.getByRole('button', { name: `Your account: ${NEWCOMER.name}` }).click();
    await page.getByRole('menuitem', { name: 'Sign out' }).click();
    await page.waitForURL('**/sign-in');
    await signIn(page, NEWCOMER);
  });

  it('makes a deposit', async () => {
    await goTo(page, '/deposits/new');
    await page.getByLabel('Name', { exact: true }).fill(DEPOSIT);
    await page.getByRole('radio', { name: 'A local grid in metres' }).check();
    await page.getByLabel('Name of the grid').fill('Hand grid');
    await page.getByLabel('Pay analyte 1', { exact: true }).fill('Cu');
    await page.getByRole('button', { name: 'Pay analyte', exact: true }).click();
    await page.getByLabel('Pay analyte 2', { exact: true }).fill('Zn');
    await page.getByLabel('Unit of pay analyte 2').selectOption('%');
    await page.getByLabel('Deleterious elements').fill('As, Sb, Hg');
    await page.getByRole('button', { name: 'Create the deposit' }).click();
    await page.waitForURL(/\/deposits\/\d+$/);
    await page.getByRole('heading', { level: 1 }).waitFor();
  });

  it('brings the demonstration tables in by hand', async () => {
    const { files } = makeDemoDeposit();
    const paths: string[] = [];
    for (const { fileName } of files) {
      const answer = await page.request.get(`/api/demo-files/${fileName}`);
      expect(answer.status(), fileName).toBe(200);
      const path = join(folder.path, fileName);
      writeFileSync(path, await answer.body());
      paths.push(path);
    }
    await openStage(page, 'Intake');
    await loadFiles(page, paths);
  });

  it('runs components on a suite and groups the intervals into six', async () => {
    await runComponents(page, makeDemoDeposit().suiteAnalytes, 'Drill intervals');
    await openStage(page, 'Groups');
    await groupBy(page, 6);
    expect(await page.getByRole('checkbox', { name: /^Take .+ for a domain$/ }).count()).toBe(6);
  });

  it('screens grades for mixed populations', async () => {
    await openStage(page, 'Populations');
    await page.getByRole('button', { name: 'Screen', exact: false }).first().click();
    await page.getByRole('button', { name: /^Screen \d+ variables$/ }).click();
    await page.getByRole('heading', { name: 'Mixing verdicts' }).waitFor();
    await page.getByText(/length-weighted · snapshot/).waitFor({ timeout: JOB_LIMIT_MS });
    expect(await page.getByText('mixed').count()).toBeGreaterThan(0);
  });

  it('accepts the groups as candidate domains and tests them', async () => {
    await openStage(page, 'Domains');
    expect(await acceptEachGroup(page)).toBe(6);
    await page.getByText('Every interval has one code').first().waitFor();
    await page.getByRole('button', { name: 'Gather evidence' }).click();
    await page.getByRole('cell', { name: 'tested', exact: true }).nth(5).waitFor({ timeout: JOB_LIMIT_MS });
  });

  it('sets limits and flags deleterious zones', async () => {
    await openStage(page, 'Geomet');
    const limits = [300, 40, 2];
    for (const [index, limit] of limits.entries()) {
      await page.getByRole('button', { name: 'Add an element' }).click();
      await page.getByLabel('Limit', { exact: true }).nth(index).fill(String(limit));
    }
    await page.getByRole('button', { name: 'Save limits' }).click();
    await page.getByText('Limits saved', { exact: true }).waitFor();
    await page.getByRole('button', { name: 'Flag zones' }).click();
    await page.getByRole('table', { name: 'Deleterious zones', exact: true }).waitFor({ timeout: JOB_LIMIT_MS });
  });

  it('takes one code per interval, in the file whose checksum is on the screen, close to the true ground', async () => {
    await openStage(page, 'Releases');
    const sha256OnScreen = await makeCodes(page);
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: /^Download [\d,\s]+ rows$/ }).click(),
    ]);
    const bytes = readFileSync(await download.path());
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(sha256OnScreen);
    const rows = z.array(DomainRow).parse(parse(bytes, { columns: true }));
    expect(rows.length).toBeGreaterThan(1000);
    const keys = new Set(rows.map(({ hole, from_m }) => `${hole} ${from_m}`));
    expect(keys.size).toBe(rows.length);
    expect(rows.filter(({ domain }) => !/^\S+$/.test(domain ?? ''))).toEqual([]);
    const { index, matched } = agreementWithTruth(rows);
    console.log(`Adjusted Rand index of the codes against the invented ground: ${index.toFixed(3)} over ${(matched * 100).toFixed(1)} % of its intervals`);
    expect(matched).toBeGreaterThan(0.99);
    expect(index).toBeGreaterThanOrEqual(0.8);
    await page.getByRole('button', { name: 'Make it again and compare' }).click();
    await page.getByText('same bytes').first().waitFor({ timeout: JOB_LIMIT_MS });
    await untilSettled(page);
    expect(complaints).toEqual([]);
  });
});
