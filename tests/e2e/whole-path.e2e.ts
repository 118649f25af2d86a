import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { Locator, Page } from 'playwright/test';
import { paths } from '~/lib/paths';
import { certificates, orderLines, orders, units } from '~/server/db/schema';
import { attachmentsOf, textOf } from '../pdf/tools';
import { expect, test } from './fixtures';
import { linkIn } from './mailbox';
import { fillCheckout } from './shop';

const email = `quirin-${randomUUID()}@buyers.example`;
const callSign = 'Q9PATH';
const trackingNumber = 'QX123456785GB';

/** What the meters show for a healthy rig, by the name of the cell; the tap takes 40 dB. */
const shown: [cell: RegExp, text: string][] = [
  [/, power$/, '-5.30 dBm'],
  [/2nd harmonic$/, '57.3'],
  [/3rd harmonic$/, '63.8'],
  [/key down$/, '561 mA'],
  [/at rest$/, '58.2 mA'],
  [/requency error$/, '14'],
  [/^Check$/, 'yes'],
];

test('the whole path: ordered, paid, built, tested, certified, shipped', async ({
  login,
  mailbox,
  database,
}) => {
  test.setTimeout(300_000);
  const startedAt = Date.now();

  // The buyer, who has no account.
  const buyer = await login('visitor');
  const orderNumber = await test.step('a buyer chooses on the panel, and pays', () => buy(buyer));
  const paid = await mailbox.expectMail(email, /is paid/);
  await buyer.goto(linkIn(paid.text, /^\/orders\//));
  const serial =
    (await buyer
      .getByText(/^H3-\d{4}$/)
      .first()
      .textContent()) ?? '';
  expect(serial).toMatch(/^H3-\d{4}$/);
  await expect(buyer.getByText('Paid', { exact: false }).first()).toBeVisible();

  const builder = await login('builder');
  await test.step('a builder picks the kit and builds the unit', async () => {
    await scan(builder, serial);
    await expect(builder.getByText(callSign)).toBeVisible();
    await expect(builder.locator('main')).not.toContainText('Quirin Quell');
    await pickKit(builder);
    await tickSteps(builder, serial);
  });

  const tester = await login('tester');
  await test.step('a tester takes all readings by keyboard, and closes the run', async () => {
    await scan(tester, serial);
    await tester.getByRole('button', { name: 'Open run 1' }).click();
    await expect(tester.getByRole('heading', { name: 'Final test' })).toBeVisible();
    await takeReadings(tester);
  });
  const certificateNumber = await test.step('the tester issues the certificate', async () => {
    await tester.getByRole('button', { name: 'Issue the certificate' }).click();
    const link = tester.getByRole('link', { name: /^Certificate / });
    await expect(tester.getByText(/is issued; its PDF follows/)).toBeVisible();
    return ((await link.textContent()) ?? '').replace('Certificate ', '');
  });

  const shipper = await login('shipper');
  await test.step('a shipper packs the unit by scanning it, and ships it', () =>
    ship(shipper, serial, orderNumber));

  const issued = await mailbox.expectMail(email, new RegExp(`${certificateNumber} for ${serial}`));
  const file = issued.attachments.find(({ contentType }) => contentType === 'application/pdf');
  const pdf = await mailbox.attachment(issued, file?.n ?? 0);
  const shipped = await mailbox.expectMail(email, /has been shipped/);
  expect(shipped.text).toContain(trackingNumber);

  const [certificate] = await database
    .select({ code: certificates.code })
    .from(certificates)
    .where(eq(certificates.number, certificateNumber));
  const code = (certificate?.code ?? '').replace(/(.{4})(.{4})(.{4})/, '$1-$2-$3');
  await test.step('the mailed PDF says what was measured', () => {
    const text = textOf(pdf);
    for (const part of [serial, certificateNumber, callSign, code, '3.00', '−57.3', '−63.8', '561', '58.2']) {
      expect(text).toContain(part);
    }
    const [attached = ''] = attachmentsOf(pdf).values();
    expect(JSON.parse(attached)).toMatchObject({ statement: { unit: { serial } } });
  });

  await test.step('anybody can check it, and does not learn whose it is', async () => {
    const stranger = await login('visitor');
    await stranger.goto(paths.certificateCheck());
    await stranger.getByLabel(/The code/).fill(code.toLowerCase());
    await stranger.getByRole('button', { name: 'Check it' }).click();
    await expect(stranger.getByText('The signature holds')).toBeVisible();
    await expect(stranger.getByText(serial).first()).toBeVisible();
    await expect(stranger.locator('body')).not.toContainText(callSign);
    await expect(stranger.locator('body')).not.toContainText('Quirin');
    expect(await stranger.content()).not.toContain(callSign);
  });

  await test.step('the buyer’s page says that it has left, with its number', async () => {
    await buyer.reload();
    await expect(buyer.locator('main')).toContainText(trackingNumber);
  });
  const rows = await database
    .select({ stage: units.stage, state: orders.state })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .where(eq(orders.number, orderNumber));
  expect(rows).toEqual([{ stage: 'gone', state: 'fulfilled' }]);
  process.stdout.write(`the whole path took ${((Date.now() - startedAt) / 1000).toFixed(1)} s\n`);
});

/** Chooses a Holm 3 with other bands than are offered, takes a place and pays; gives the order's number. */
async function buy(page: Page): Promise<number> {
  await page.goto(paths.shop());
  await page.getByRole('link', { name: /Choose a Holm 3/ }).click();
  await expect(page.getByRole('heading', { level: 1 })).toContainText('Holm 3');
  await page.getByRole('checkbox', { name: /^40 m/ }).uncheck();
  const place = page.getByRole('button', { name: /Take a place/ });
  await expect(place).toBeDisabled();
  await page.getByRole('checkbox', { name: /^15 m/ }).check();
  await expect(place).toBeEnabled();
  await place.click();
  await fillCheckout(page, { email, callSign });
  await page.getByRole('button', { name: 'Go to payment' }).click();
  // The payment page: declined first, then paid.
  await page.getByLabel('Card number').fill('4000 0000 0000 0002');
  await page.getByRole('button', { name: /^Pay/ }).click();
  await expect(page.getByRole('alert')).toContainText(/declined/i);
  await page.getByLabel('Card number').fill('4242 4242 4242 4242');
  await page.getByRole('button', { name: /^Pay/ }).click();
  await expect(page.getByRole('heading', { level: 1 })).toContainText(/^Order \d+/);
  return Number(/\d+/.exec((await page.getByRole('heading', { level: 1 }).textContent()) ?? '')?.[0]);
}

/** Goes to what a scanned tag names. */
async function scan(page: Page, text: string): Promise<void> {
  await page.goto(paths.works());
  await page.keyboard.press('/');
  await page.keyboard.type(text);
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { level: 1, name: text })).toBeVisible();
}

async function pickKit(page: Page): Promise<void> {
  await page.getByRole('link', { name: 'Pick the kit' }).click();
  const issue = page.getByRole('button', { name: /^Issue .* to batch/ });
  const finish = page.getByRole('button', { name: 'Finish the kit' });
  const lotField = page.getByLabel('Scan a lot');
  await expect(issue.or(lotField)).not.toHaveCount(0);
  if ((await issue.count()) > 0) {
    await issue.click();
    await expect(issue).toHaveCount(0);
  }
  // A scanner types the lot's number and Enter; the lots on the page stand for the labels on the bins.
  const lots = page.getByRole('row').getByRole('combobox', { name: /^Lot for/ });
  while ((await lots.count()) > 0) {
    const lot = await lots.first().inputValue();
    const before = await page.getByText(/of \d+ lines complete/).textContent();
    await lotField.fill(lot);
    await lotField.press('Enter');
    await expect(page.getByText(new RegExp(`from ${lot}\\.`))).toBeVisible();
    await expect(page.getByText(before ?? '', { exact: true })).toHaveCount(0);
  }
  await page.getByLabel('Minutes').fill('24');
  await finish.click();
  await expect(finish).toHaveCount(0);
}

/** Does every step of the build sheet in order, with an entry in the middle of what the sheet allows. */
async function tickSteps(page: Page, serial: string): Promise<void> {
  await page.goto(paths.unitBuild(serial));
  const next = page.locator('li[aria-current="step"]');
  while ((await next.count()) > 0) {
    const title = (await next.getByRole('heading').textContent()) ?? '';
    const entry = next.locator('input[name="entry"]');
    if ((await entry.count()) > 0) {
      const hint = (await next.locator('form').textContent()) ?? '';
      await entry.fill(middleOf(hint));
    }
    await next.getByRole('button', { name: 'Done' }).click();
    await expect(next.getByRole('heading', { name: title.trim(), exact: true })).toHaveCount(0);
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
  }
  await expect(page.getByText('It is built.')).toBeVisible();
}

function middleOf(hint: string): string {
  const [lower, upper] = [...hint.matchAll(/[−-]?\d+(?:\.\d+)?(?= to| [A-Za-zµ])/gu)].map(([text]) =>
    Number(text.replace('−', '-')),
  );
  return lower === undefined || upper === undefined ? 'as the sheet says' : String((lower + upper) / 2);
}

/** Fills every cell without a mouse, choosing the instruments that are calibrated, and closes the run. */
async function takeReadings(page: Page): Promise<void> {
  const grid = page.getByRole('region', { name: 'Readings by band and quantity' });
  const inHand = grid.locator('input[tabindex="0"]');
  await tabTo(page, inHand);
  const cells = await grid.locator('input').count();
  const chosen = new Set<string>();
  for (let taken = 0; taken < cells; taken += 1) {
    const name = (await page.locator(':focus').getAttribute('aria-label')) ?? '';
    const [cell, text] = shown.find(([pattern]) => pattern.test(name)) ?? [];
    if (cell === undefined || text === undefined) throw new Error(`What does the meter show for “${name}”?`);
    const instrument = /power$/.test(name) ? 'PM-2' : /harmonic$/.test(name) ? 'SA-1' : undefined;
    if (instrument !== undefined && !chosen.has(String(cell))) {
      chosen.add(String(cell));
      await tabTo(page, page.getByLabel('Instrument'));
      await page.keyboard.type(instrument);
      await tabTo(page, grid.getByLabel(name, { exact: true }), 'Shift+Tab');
    }
    await page.keyboard.type(text);
    await page.keyboard.press('Enter');
    const mark = grid.locator('label', { has: page.getByLabel(name, { exact: true }) });
    await expect(mark.locator('[data-verdict]')).toHaveAttribute('data-verdict', 'pass');
  }
  await expect(page.getByText(`${cells} of ${cells} readings in`)).toBeVisible();
  await expect(page.getByRole('button', { name: 'Close the run' })).toBeEnabled();
  await page.keyboard.press('Alt+c');
  const dialog = page.getByRole('dialog', { name: /Close run 1 as passed/ });
  await expect(dialog).toBeVisible();
  await tabTo(page, dialog.getByRole('button', { name: 'Close the run' }));
  await page.keyboard.press('Enter');
  await expect(page.getByText('Run 1: passed')).toBeVisible();
}

/** Presses Tab until something has the focus. */
async function tabTo(page: Page, target: Locator, key: 'Tab' | 'Shift+Tab' = 'Tab'): Promise<void> {
  for (let presses = 0; presses < 80; presses += 1) {
    if (await target.evaluate((element) => element === document.activeElement)) return;
    await page.keyboard.press(key);
  }
  throw new Error(`${key} does not reach ${String(target)}.`);
}

async function ship(page: Page, serial: string, orderNumber: number): Promise<void> {
  await page.goto(paths.dispatch());
  // The certificate is printed within seconds; until then the unit waits.
  await expect(async () => {
    await page.reload();
    await expect(page.getByRole('link', { name: `Pack order ${orderNumber}` })).toBeVisible({ timeout: 500 });
  }).toPass({ timeout: 30_000 });
  await page.getByRole('link', { name: `Pack order ${orderNumber}` }).click();
  await expect(page.getByRole('complementary', { name: 'Where it goes' })).toContainText('7 Heather Row');
  await page.getByLabel(/Scan every unit/).fill(serial);
  await page.getByRole('checkbox', { name: /printed test sheet/ }).check();
  await page.getByRole('checkbox', { name: /cautions/ }).check();
  await page.getByRole('checkbox', { name: /customs data/ }).check();
  await page.getByLabel(/Weight of the parcel/).fill('980');
  await page.getByRole('button', { name: 'Pack these units' }).click();
  await expect(page.getByRole('heading', { level: 1, name: /^Shipment \d+/ })).toBeVisible();
  await page.getByLabel('Carrier').fill('Thistle Post');
  await page.getByLabel('Tracking number', { exact: true }).fill(trackingNumber);
  await page.getByRole('button', { name: 'Ship the parcel' }).click();
  await expect(page.getByRole('main')).toContainText(trackingNumber);
}
