import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import * as z from 'zod';
import { pageViolations } from '#tests/support/journey-axe.ts';
import { DESK, goTo, launchBrowser, openContext, openPage, PHONE, sidewaysOverflow } from '#tests/support/journey-browser.ts';
import { ask, depositNamed, LEAD, signIn } from '#tests/support/journey-steps.ts';

const Listed = z.array(z.looseObject({ id: z.number() }));
const NO_SUCH_TOKEN = 'a-link-that-was-never-sent-by-anyone';

/** Pages by path, each with its heading. */
type Pages = Record<string, string | RegExp>;
const OPEN_PAGES: Pages = { '/sign-in': /^Find the edge/, '/forgotten': /./, [`/reset/${NO_SUCH_TOKEN}`]: /./, [`/accept/${NO_SUCH_TOKEN}`]: 'An invitation', '/mailbox': /./ };
const PEOPLE_PAGES: Pages = { '/deposits': 'Deposits', '/deposits/new': 'New deposit', '/account': 'Your account', '/admin': 'Administration' };
const DEPOSIT_PAGES: Pages = {
  '': 'Varrowmere', '/intake': 'Intake', '/suite': 'Suite', '/components': 'Components', '/groups': 'Groups', '/populations': 'Populations', '/domains': 'Domains',
  '/geomet': 'Geomet', '/releases': 'Releases', '/record': 'Record', '/members': 'People and tokens', '/settings': /./, '/holes': 'Holes',
};
const FITTING_PAGES = ['', '/intake', '/domains', '/releases'];
const THEMES = ['light', 'dark'] as const;

describe('every page, light and dark', () => {
  let browser: Browser;
  let page: Page;
  let complaints: string[];
  beforeAll(async () => {
    browser = await launchBrowser();
    ({ page, complaints } = await openPage(browser, inject('journeyUrl')));
  });
  afterAll(() => browser.close());

  async function judge(pages: Pages): Promise<void> {
    const found: string[] = [];
    for (const [path, heading] of Object.entries(pages)) {
      await goTo(page, path);
      await page.getByRole('heading', { level: 1, name: heading }).waitFor();
      for (const colorScheme of THEMES) {
        await page.emulateMedia({ colorScheme });
        found.push(...(await pageViolations(page)).map((violation) => `${path} ${colorScheme} ${violation}`));
      }
    }
    expect(found).toEqual([]);
    // An invitation that was never sent is answered 404, which Chromium writes to the console.
    expect(complaints.filter((text) => !text.endsWith(`/api/invitations/${NO_SUCH_TOKEN}`))).toEqual([]);
  }

  it('keeps WCAG 2.2 AA before the sign-in', () => judge(OPEN_PAGES));

  it('keeps WCAG 2.2 AA for people and deposits', async () => {
    await signIn(page);
    await judge(PEOPLE_PAGES);
  });

  it('keeps WCAG 2.2 AA within a deposit', async () => {
    const depositId = await depositNamed(page, 'Varrowmere');
    const [upload] = Listed.parse(await ask(page, `/deposits/${depositId}/uploads`));
    const { domains } = z.object({ domains: Listed }).parse(await ask(page, `/deposits/${depositId}/domains`));
    const inner = { ...DEPOSIT_PAGES, [`/intake/${upload?.id}`]: /from .+csv$/, [`/domains/${domains[0]?.id}`]: /./ };
    await judge(Object.fromEntries(Object.entries(inner).map(([path, heading]) => [`/deposits/${depositId}${path}`, heading])));
  });
});

describe('room on the screen', () => {
  let browser: Browser;
  beforeAll(async () => void (browser = await launchBrowser()));
  afterAll(() => browser.close());

  it.each([DESK, PHONE])('nothing scrolls sideways at $width × $height', async (viewport) => {
    const context = await openContext(browser, inject('journeyUrl'), { viewport });
    const page = await context.newPage();
    const wide: string[] = [];
    const look = async (path: string): Promise<void> => {
      await goTo(page, path);
      const over = await sidewaysOverflow(page);
      const cut = await page.evaluate(() => {
        const main = document.querySelector('main');
        return main ? main.scrollWidth - main.clientWidth : 0;
      });
      if (over > 0 || cut > 0) wide.push(`${path}: page by ${over} px, main by ${cut} px`);
    };
    await look('/sign-in');
    await signIn(page);
    const depositId = await depositNamed(page, 'Varrowmere');
    await look('/deposits');
    for (const path of FITTING_PAGES) await look(`/deposits/${depositId}${path}`);
    expect(wide).toEqual([]);
  });
});

describe('the session', () => {
  let browser: Browser;
  let page: Page;
  beforeAll(async () => {
    browser = await launchBrowser();
    page = await (await openContext(browser, inject('journeyUrl'))).newPage();
  });
  afterAll(() => browser.close());

  it('cannot be read by a script of the page', async () => {
    await signIn(page);
    const cookies = await page.context().cookies();
    const session = cookies.find(({ httpOnly, value }) => httpOnly && value.split('.').length === 3);
    expect(session).toMatchObject({ httpOnly: true, sameSite: expect.stringMatching(/Lax|Strict/) as string });
    const readable = await page.evaluate(() => JSON.stringify([document.cookie, { ...localStorage }, { ...sessionStorage }]));
    for (const part of session?.value.split('.') ?? []) expect(readable).not.toContain(part);
    // A signed token begins with the base64url of `{"` (RFC 7519 and RFC 4648).
    expect(readable).not.toMatch(/eyJ[\w-]+\.[\w-]+\./);
  });

  it('leaves nothing behind: after signing out, Back shows the sign-in again', async () => {
    const depositId = await depositNamed(page, 'Varrowmere');
    await goTo(page, `/deposits/${depositId}/domains`);
    await page.getByRole('button', { name: `Your account: ${LEAD.name}` }).click();
    await page.getByRole('menuitem', { name: 'Sign out' }).click();
    await page.waitForURL('**/sign-in');
    await page.getByRole('button', { name: 'Sign in', exact: true }).waitFor();
    await page.goBack();
    await page.getByRole('button', { name: 'Sign in', exact: true }).waitFor();
    const shown = (await page.textContent('body')) ?? '';
    expect(shown).not.toContain('Varrowmere');
    const answer = await page.request.get(`/api/deposits/${depositId}`);
    expect(answer.status()).toBe(401);
  });
});
