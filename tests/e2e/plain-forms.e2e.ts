import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { paths } from '~/lib/paths';
import { contacts } from '~/server/db/schema';
import { expect, test } from './fixtures';
import { fillCheckout, openOrder } from './shop';

test.describe('without JavaScript', () => {
  test('the shop takes an order as far as the payment page', async ({ login }) => {
    const page = await login('visitor', { javaScriptEnabled: false });
    await page.goto(paths.shop());
    await page.getByRole('link', { name: /Choose a Holm 3/ }).click();
    await page.getByRole('button', { name: 'Draw my choice' }).click();
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
    await page.getByRole('button', { name: 'Take a place' }).click();
    await fillCheckout(page, { email: 'plain@buyers.example' });
    await page.getByRole('button', { name: 'Go to payment' }).click();
    await page.getByRole('link', { name: 'Go to the payment page' }).click();
    await page.getByRole('button', { name: /^Pay/ }).waitFor();
  });

  test('a wrong password is said beside the field, and the address stays', async ({ login }) => {
    const page = await login('visitor', { javaScriptEnabled: false });
    await page.goto(paths.signIn());
    const form = page.locator('form', { has: page.getByLabel('Password') });
    await form.getByLabel('E-mail address').fill('owner@thistledown.test');
    await form.getByLabel('Password').fill('not the password');
    await form.getByRole('button', { name: 'Sign in' }).click();
    await expect(form.getByLabel('E-mail address')).toHaveValue('owner@thistledown.test');
    const password = form.getByLabel('Password');
    await expect(password).toHaveValue('');
    await expect(password).toHaveAttribute('aria-invalid', 'true');
    await expect(password).toHaveAccessibleDescription(/do not belong together/);
  });

  test('an order that is refused comes back with what was typed', async ({ login }) => {
    const page = await login('visitor', { javaScriptEnabled: false });
    await openOrder(page);
    await fillCheckout(page, { email: 'plain@buyers.example', callSign: 'not a call sign' });
    await page.getByRole('button', { name: 'Go to payment' }).click();
    const callSign = page.getByLabel('Call sign');
    await expect(callSign).toHaveValue('not a call sign');
    await expect(callSign).toHaveAccessibleDescription(/does not look like a call sign/);
    await expect(page.getByLabel('Town')).toHaveValue('Nowhere');
    await expect(page.getByLabel('Street and house')).toHaveValue('7 Heather Row');
  });
});

test('a choice made before the page’s script has come counts when it comes', async ({ login }) => {
  const page = await login('visitor');
  let release = () => {};
  const held = new Promise<void>((resolve) => (release = resolve));
  await page.route('**/_astro/RigChooser*.js', async (route) => {
    await held;
    await route.continue();
  });
  await page.goto(paths.rig('holm-3'), { waitUntil: 'domcontentloaded' });
  await page.getByRole('checkbox', { name: /^40 m/ }).uncheck();
  await expect(page.getByRole('button', { name: 'Take a place' })).toBeEnabled();
  release();
  await expect(page.getByRole('button', { name: 'Take a place' })).toBeDisabled();
  await expect(page.getByRole('checkbox', { name: /^40 m/ })).not.toBeChecked();
});

test('a double click takes one place', async ({ login, database }) => {
  const page = await login('visitor');
  const email = `twice-${randomUUID()}@buyers.example`;
  await openOrder(page);
  await fillCheckout(page, { email });
  await page.getByRole('button', { name: 'Go to payment' }).dblclick();
  await page.getByRole('button', { name: /^Pay/ }).waitFor();
  expect(await database.$count(contacts, eq(contacts.email, email))).toBe(1);
});

test('going back from the payment page and sending the form again takes one place', async ({
  login,
  database,
}) => {
  const page = await login('visitor');
  const email = `back-${randomUUID()}@buyers.example`;
  await openOrder(page);
  await fillCheckout(page, { email });
  await page.getByRole('button', { name: 'Go to payment' }).click();
  await page.getByRole('button', { name: /^Pay/ }).waitFor();
  const payPage = page.url();
  await page.goBack();
  await page.getByRole('button', { name: 'Go to payment' }).click();
  await page.getByRole('button', { name: /^Pay/ }).waitFor();
  expect(page.url()).toBe(payPage);
  expect(await database.$count(contacts, eq(contacts.email, email))).toBe(1);
});
