import type { Page } from 'playwright-core';
import * as z from 'zod';
import { untilSettled } from './journey-browser.ts';

export const LEAD = { name: 'Maren Oyelade', email: 'lead@demo.example', password: 'core-tray-and-lamp' };

export async function signIn(page: Page, person: { email: string; password: string } = LEAD): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(person.email);
  await page.getByLabel('Password').fill(person.password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL('**/deposits');
  await untilSettled(page);
}

export async function signOut(page: Page): Promise<void> {
  await page.getByRole('button', { name: /^Your account/ }).click();
  await page.getByRole('menuitem', { name: 'Sign out' }).click();
  await page.waitForURL('**/sign-in');
}

const Ids = z.array(z.looseObject({ id: z.number(), name: z.string() }));

/** Asks the API as the person in the page. */
export async function ask(page: Page, path: string): Promise<unknown> {
  const answer = await page.request.get(`/api${path}`);
  if (!answer.ok()) throw new Error(`GET ${path} answered ${answer.status()}: ${await answer.text()}`);
  return answer.json();
}

export async function depositNamed(page: Page, name: string): Promise<number> {
  const found = Ids.parse(await ask(page, '/deposits')).find((deposit) => deposit.name === name);
  if (!found) throw new Error(`no deposit ${name} for the person signed in`);
  return found.id;
}

/** Goes to a stage by the rail, as a person does. */
export async function openStage(page: Page, name: string): Promise<void> {
  await page.getByRole('navigation', { name: 'Stages' }).getByRole('link', { name: new RegExp(name) }).click();
  await page.getByRole('heading', { level: 1, name }).waitFor();
  await untilSettled(page);
}

const Mailbox = z.array(z.object({ to: z.string(), text: z.string() }));

/** Path of the link in the newest message to an address. */
export async function linkMailedTo(page: Page, address: string): Promise<string> {
  const message = Mailbox.parse(await ask(page, '/mailbox')).find(({ to }) => to === address);
  const link = message?.text.match(/https?:\/\/\S+/)?.[0];
  if (!link) throw new Error(`no link was mailed to ${address}`);
  return new URL(link).pathname;
}
