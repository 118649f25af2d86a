import type { Page } from 'playwright/test';
import { paths } from '~/lib/paths';

interface Buyer {
  email: string;
  callSign?: string;
  country?: string;
}

/** From the shop's first page to the order form of a Holm 3, as it is offered. */
export async function openOrder(page: Page): Promise<void> {
  await page.goto(paths.shop());
  await page.getByRole('link', { name: /Choose a Holm 3/ }).click();
  await page.getByRole('button', { name: 'Take a place' }).click();
  await page.getByRole('button', { name: 'Go to payment' }).waitFor();
}

/** Fills the order form; all of it is paid at once. */
export async function fillCheckout(
  page: Page,
  { email, callSign = 'Q1TEST', country = 'Germany' }: Buyer,
): Promise<void> {
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Call sign').fill(callSign);
  await page.getByLabel('Name', { exact: true }).fill('Quirin Quell');
  await page.getByLabel('Street and house').fill('7 Heather Row');
  await page.getByLabel('Town').fill('Nowhere');
  await page.getByLabel('Postcode').fill('00123');
  await page.getByLabel('Country').selectOption({ label: country });
  await page.getByRole('radio', { name: 'All of it' }).check();
}
