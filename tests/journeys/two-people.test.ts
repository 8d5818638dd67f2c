import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import * as z from 'zod';
import { goTo, launchBrowser, openContext, watchComplaints } from '#tests/support/journey-browser.ts';
import { ask, depositNamed, LEAD, signIn } from '#tests/support/journey-steps.ts';

const GEOLOGIST = { email: 'geologist@demo.example', password: LEAD.password };
/** Longest until a change of somebody else is on the screen. */
const SEEN_WITHIN_MS = 5_000;

const Groupings = z.array(z.looseObject({ isActive: z.boolean(), groups: z.array(z.looseObject({ name: z.string() })) }));

describe('two people on one deposit', () => {
  let browser: Browser;
  let [lead, geologist]: Page[] = [];
  let complaints: string[] = [];
  let depositId = 0;
  beforeAll(async () => {
    browser = await launchBrowser();
  });
  afterAll(() => browser.close());

  const pages = (): { lead: Page; geologist: Page } => {
    if (!lead || !geologist) throw new Error('nobody is signed in');
    return { lead, geologist };
  };

  it('look at the same groups', async () => {
    lead = await (await openContext(browser, inject('journeyUrl'))).newPage();
    geologist = await (await openContext(browser, inject('journeyUrl'))).newPage();
    complaints = watchComplaints(geologist);
    await signIn(lead);
    await signIn(geologist, GEOLOGIST);
    depositId = await depositNamed(lead, 'Varrowmere');
    for (const page of [lead, geologist]) {
      await goTo(page, `/deposits/${depositId}/groups`);
      await page.getByRole('table', { name: /^Groups of / }).waitFor();
    }
  });

  it('CO-04 see each other’s changes without loading the page again', async () => {
    const { lead, geologist } = pages();
    const active = Groupings.parse(await ask(lead, `/deposits/${depositId}/groupings`)).find(({ isActive }) => isActive);
    const before = active?.groups[0]?.name ?? '';
    const after = `${before} seen by two`;
    await rename(geologist, before, after);
    await lead.getByRole('button', { name: `${after}, rename` }).waitFor({ timeout: SEEN_WITHIN_MS });
    await rename(lead, after, before);
    await geologist.getByRole('button', { name: `${before}, rename` }).waitFor({ timeout: SEEN_WITHIN_MS });
    expect(complaints).toEqual([]);
  });
});

async function rename(page: Page, from: string, to: string): Promise<void> {
  await page.getByRole('button', { name: `${from}, rename` }).click();
  const field = page.getByRole('textbox', { name: `Name of ${from}` });
  await field.fill(to);
  await field.press('Enter');
  await page.getByRole('button', { name: `${to}, rename` }).waitFor();
}
