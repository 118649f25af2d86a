import type { Page } from 'playwright/test';
import { paths } from '~/lib/paths';
import { demoSignIns } from '~/server/run/demo/people';

/** Whom the demo works lets in with a password; `visitor` is nobody. */
export type Role = 'owner' | 'builder' | 'tester' | 'shipper' | 'bookkeeper' | 'buyer';
export type Viewer = Role | 'visitor';

/** Signs in as a person does: with address and password, on the page for it. */
export async function signIn(page: Page, role: Role): Promise<void> {
  const known = demoSignIns.find((one) => one.role === role);
  if (known === undefined) throw new Error(`The demo works has no ${role}.`);
  await page.goto(paths.signIn());
  const form = page.locator('form', { has: page.getByLabel('Password') });
  await form.getByLabel('E-mail address').fill(known.email);
  await form.getByLabel('Password').fill(known.password);
  await form.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL(role === 'buyer' ? `**${paths.myOrders()}` : `**${paths.works()}`);
}

/** Has a sign-in link mailed to the buyer, so that there is one to look at. */
export async function askForLink(baseUrl: string): Promise<void> {
  const buyer = demoSignIns.find(({ role }) => role === 'buyer');
  const answer = await fetch(new URL(paths.api.signInLinks(), baseUrl), {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ email: buyer?.email }),
  });
  if (!answer.ok) throw new Error(`Asking for a sign-in link answers ${answer.status}.`);
}

/** Waits until a page has what it is made of: its islands are alive. */
export async function waitForIslands(page: Page): Promise<void> {
  await page.waitForFunction(() => document.querySelector('astro-island[ssr]') === null);
}
