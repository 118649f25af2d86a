import { randomUUID } from 'node:crypto';
import type { Page } from 'playwright/test';
import { paths } from '~/lib/paths';
import { expect, test } from './fixtures';

/** Changes a unit as another person does, by a script with their cookie, and takes it back. */
async function holdAndEnd(page: Page, serial: string, seen: () => Promise<void>): Promise<void> {
  const origin = new URL(page.url()).origin;
  const send = async (path: string, reason: string): Promise<unknown> => {
    const answer = await page.request.post(path, {
      headers: { origin, 'idempotency-key': randomUUID() },
      data: { reason },
    });
    expect(answer.status()).toBe(200);
    return answer.json();
  };
  const placed = await send(paths.api.holds(serial), 'Waits for a look at its knob');
  await seen();
  if (typeof placed !== 'object' || placed === null || !('holdId' in placed)) throw new Error('No hold.');
  await send(paths.api.hold(serial, Number(placed.holdId)), 'Looked at');
}

async function serialOnFloor(page: Page): Promise<string> {
  await page.goto(paths.floor());
  const href = await page.locator('a[href^="/works/units/"]').first().getAttribute('href');
  const [, serial] = /^\/works\/units\/([^/]+)/.exec(href ?? '') ?? [];
  if (serial === undefined) throw new Error('There is no unit on the floor.');
  return serial;
}

test('a unit’s page follows what others do, and leaves who is typing alone', async ({ login }) => {
  const tester = await login('tester');
  const builder = await login('builder');
  const serial = await serialOnFloor(builder);
  await builder.goto(paths.unit(serial));
  await tester.goto(paths.unit(serial));
  const reason = 'Waits for a look at its knob';

  await holdAndEnd(tester, serial, async () => {
    await expect(builder.getByText(reason).first()).toBeVisible();
  });

  // Typed into a field of the page, which a reload would empty.
  await builder.goto(paths.unit(serial));
  const field = builder.getByLabel('Why it must stop');
  await builder.locator('details').evaluateAll((all) => all.forEach((one) => one.setAttribute('open', '')));
  await field.fill('half a sentence');
  await holdAndEnd(tester, serial, async () => {
    await expect(builder.getByText('This page has changed.')).toBeVisible();
    await expect(field).toHaveValue('half a sentence');
  });
  await builder.getByRole('button', { name: 'Show it' }).click();
  await expect(builder.getByText('This page has changed.')).toBeHidden();
});
