import { fileURLToPath } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import * as z from 'zod';
import { expectWithin } from '#tests/support/expect-within.ts';
import { goTo, launchBrowser, openPage, untilSettled } from '#tests/support/journey-browser.ts';
import { acceptEachGroup, depositInHand, groupBy, JOB_LIMIT_MS, makeCodes, runComponents, untilAssembled } from '#tests/support/journey-stages.ts';
import { ask, openStage, signIn } from '#tests/support/journey-steps.ts';
import { loadReference } from '#tests/support/reference.ts';

/**
 * The Jura soil samples, an open data set: source and licence in tests/fixtures/reference/README.md.
 * Expected eigenvalues are those of prcomp in R, checked there against a second library.
 */
const jura = loadReference('jura_prediction');
const FILE = fileURLToPath(new URL('../fixtures/reference/jura_prediction.csv', import.meta.url));
const METALS = ['Cd', 'Co', 'Cr', 'Cu', 'Ni', 'Pb', 'Zn'];

const ComponentRun = z.looseObject({ nFit: z.number(), eigenvalues: z.array(z.number()) });

describe('open data from a file to codes', () => {
  let browser: Browser;
  let page: Page;
  let complaints: string[];
  beforeAll(async () => {
    browser = await launchBrowser();
    ({ page, complaints } = await openPage(browser, inject('journeyUrl')));
    await signIn(page);
  });
  afterAll(() => browser.close());

  it('makes a deposit for surface samples', async () => {
    await goTo(page, '/deposits/new');
    await page.getByLabel('Name', { exact: true }).fill('Open soil');
    await page.getByLabel('Deleterious elements').fill('Cd, Pb');
    await page.getByRole('button', { name: 'Create the deposit' }).click();
    await page.waitForURL(/\/deposits\/\d+$/);
    await page.getByRole('heading', { level: 1 }).waitFor();
  });

  it('maps a file that says no units, checks its rows and loads them', async () => {
    await openStage(page, 'Intake');
    await page.getByLabel('Drop CSV files here').setInputFiles(FILE);
    await page.getByRole('link', { name: 'jura_prediction.csv' }).click();
    await page.getByRole('table', { name: /^Columns of jura_prediction.csv/ }).waitFor();
    await page.getByLabel('This file holds').selectOption({ label: 'surface samples' });
    for (const [column, role] of [['Xloc', 'x'], ['Yloc', 'y'], ['long', 'skip'], ['lat', 'skip'], ['Landuse', 'skip'], ['Rock', 'code']] as const)
      await page.getByLabel(`${column} is`, { exact: true }).selectOption(role);
    for (const metal of METALS) {
      await page.getByLabel(`${metal} is`, { exact: true }).selectOption('analyte');
      await page.getByLabel(`${metal}: unit`, { exact: true }).selectOption('ppm');
    }
    await page.getByRole('button', { name: 'Check all 259 rows' }).click();
    await page.getByRole('button', { name: 'Load 259 rows' }).click({ timeout: JOB_LIMIT_MS });
    await page.getByText('259 rows of 259 stand').waitFor({ timeout: JOB_LIMIT_MS });
    await untilAssembled(page);
  });

  it('finds the eigenvalues that the reference library finds', async () => {
    await runComponents(page, METALS, 'Surface samples');
    await page.getByText('Samples fitted').waitFor();
    const [run] = z.array(ComponentRun).parse(await ask(page, `/deposits/${depositInHand(page)}/component-runs`));
    const { nFit, eigenvalues } = run ?? { nFit: 0, eigenvalues: [] };
    expect(nFit).toBe(259);
    expectWithin(jura.check('jura_prediction.pca_clr_cov.eigenvalues'), eigenvalues.slice(0, 6));
  });

  it('goes on to one code for each sample', async () => {
    await openStage(page, 'Groups');
    await groupBy(page, 4);
    await openStage(page, 'Domains');
    expect(await acceptEachGroup(page)).toBe(4);
    await openStage(page, 'Releases');
    expect(await makeCodes(page)).toMatch(/^[0-9a-f]{64}$/);
    await page.getByText(/^259 intervals/).waitFor();
    await page.getByRole('table', { name: 'Codes 1 by domain' }).waitFor();
    await untilSettled(page);
    expect(complaints).toEqual([]);
  });
});
