import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { launchBrowser, openPage, untilSettled } from '#tests/support/journey-browser.ts';
import { LEAD } from '#tests/support/journey-steps.ts';

const MOST_TABS = 60;

/** Words a reader would hear for the element in focus. */
const inFocus = (page: Page): Promise<string> =>
  page.evaluate(() => {
    const held = document.activeElement;
    if (!held || held === document.body) return '';
    const labels = held instanceof HTMLInputElement ? [...(held.labels ?? [])].map((label) => label.textContent) : [];
    return (held.getAttribute('aria-label') ?? (labels.join(' ') || held.textContent)).trim();
  });

async function tabTo(page: Page, wanted: RegExp): Promise<void> {
  const passed: string[] = [];
  for (let press = 0; press < MOST_TABS; press++) {
    await page.keyboard.press('Tab');
    const words = await inFocus(page);
    if (wanted.test(words)) return;
    passed.push(words);
  }
  throw new Error(`Tab does not reach ${wanted.source}; it passes ${passed.join(' | ')}`);
}

describe('without a mouse', () => {
  let browser: Browser;
  let page: Page;
  let complaints: string[];
  beforeAll(async () => {
    browser = await launchBrowser();
    ({ page, complaints } = await openPage(browser, inject('journeyUrl')));
  });
  afterAll(() => browser.close());

  it('signs in and reaches the domains of a deposit by Tab and Enter', async () => {
    await page.goto('/sign-in');
    await untilSettled(page);
    await tabTo(page, /^E-mail/);
    await page.keyboard.type(LEAD.email);
    await tabTo(page, /^Password/);
    await page.keyboard.type(LEAD.password);
    await page.keyboard.press('Enter');
    await page.waitForURL('**/deposits');
    await untilSettled(page);
    await tabTo(page, /^Varrowmere/);
    await page.keyboard.press('Enter');
    await page.waitForURL(/\/deposits\/\d+$/);
    await untilSettled(page);
    await page.getByRole('navigation', { name: 'Stages' }).waitFor();
    await tabTo(page, /^\d*Domains/);
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { level: 1, name: 'Domains' }).waitFor();
    expect(new URL(page.url()).pathname).toMatch(/\/domains$/);
  });

  it('skips the bar and the rail by the first link of the page', async () => {
    await page.reload();
    await untilSettled(page);
    await page.keyboard.press('Tab');
    expect(await inFocus(page)).toBe('Skip to the evidence');
    const place = await page.getByRole('link', { name: 'Skip to the evidence' }).boundingBox();
    expect(place?.y ?? -1).toBeGreaterThanOrEqual(0);
    await page.keyboard.press('Enter');
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.closest('main') !== null)).toBe(true);
  });

  it('finds a stage by Ctrl K and goes there by Enter; Escape closes', async () => {
    await page.keyboard.press('Control+k');
    const palette = page.getByRole('dialog', { name: 'Find or do' });
    await palette.waitFor();
    await page.keyboard.press('Escape');
    await palette.waitFor({ state: 'detached' });
    await page.keyboard.press('Control+k');
    await page.keyboard.type('releas');
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { level: 1, name: 'Releases' }).waitFor();
    await palette.waitFor({ state: 'detached' });
  });

  it('lists all keys on ?, and g with a digit goes to a stage', async () => {
    await page.keyboard.press('?');
    const sheet = page.getByRole('dialog', { name: 'Keys' });
    await sheet.waitFor();
    expect(await sheet.textContent()).toContain('Undo the last edit');
    await page.keyboard.press('Escape');
    await sheet.waitFor({ state: 'detached' });
    await page.keyboard.press('g');
    await page.keyboard.press('2');
    await page.getByRole('heading', { level: 1, name: 'Intake' }).waitFor();
    expect(complaints).toEqual([]);
  });
});
