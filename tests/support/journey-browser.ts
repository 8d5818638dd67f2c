import { chromium, type Browser, type BrowserContext, type BrowserContextOptions, type Page } from 'playwright-core';
import { CHROMIUM_FLAGS, findChromium } from './chromium.ts';

export const DESK = { width: 1366, height: 768 };
export const PHONE = { width: 390, height: 844 };
/** Longest a step of a page may take; jobs have their own limits. */
const STEP_LIMIT_MS = 30_000;

export async function launchBrowser(): Promise<Browser> {
  const executablePath = findChromium();
  if (!executablePath) throw new Error('no Chromium found: install it or set CHROMIUM_PATH');
  return chromium.launch({ executablePath, args: CHROMIUM_FLAGS });
}

export async function openContext(
  browser: Browser,
  baseURL: string,
  options: BrowserContextOptions = {},
): Promise<BrowserContext> {
  const context = await browser.newContext({
    baseURL,
    viewport: DESK,
    reducedMotion: 'reduce',
    acceptDownloads: true,
    ...options,
  });
  context.setDefaultTimeout(STEP_LIMIT_MS);
  return context;
}

/** Asking who is signed in is answered 401 before the sign-in, which Chromium writes to the console. */
const isWhoAmI = (text: string, url: string): boolean =>
  text.includes('status of 401') && new URL(url).pathname === '/api/me';

/** What the browser complains about on a page from now on: errors, refused content, broken scripts. */
export function watchComplaints(page: Page): string[] {
  const complaints: string[] = [];
  page.on('console', (message) => {
    const { url } = message.location();
    if (message.type() !== 'error' || (url && isWhoAmI(message.text(), url))) return;
    complaints.push(`${page.url()}: ${message.text()} ${url}`);
  });
  page.on('pageerror', (error) => complaints.push(`${page.url()}: ${error.message}`));
  return complaints;
}

/** A page of a context of its own on the server under test, with what the browser complains about on it. */
export async function openPage(browser: Browser, baseURL: string): Promise<{ page: Page; complaints: string[] }> {
  const page = await (await openContext(browser, baseURL)).newPage();
  return { page, complaints: watchComplaints(page) };
}

/** Waits until the page's heading stands and nothing is being read any more. */
export async function untilSettled(page: Page): Promise<void> {
  await page.getByRole('heading', { level: 1 }).first().waitFor();
  await page.waitForFunction(
    () =>
      ![...document.querySelectorAll('[role="status"]')].some((line) =>
        /^(Reading|Loading)/.test(line.textContent.trim()),
      ),
  );
  await page.evaluate(() => document.fonts.ready.then(() => undefined));
}

export async function goTo(page: Page, path: string): Promise<void> {
  await page.goto(path);
  await untilSettled(page);
}

/** The page's own width against the window's: more than that can be scrolled sideways. */
export const sidewaysOverflow = (page: Page): Promise<number> =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
