import { randomUUID } from 'node:crypto';
import { paths } from '~/lib/paths';
import { expect, test } from './fixtures';

const pad = [
  '! measured at the bench',
  '# MHz S DB R 50',
  '1 -32 0 -20.02 0 -20.02 0 -30 0',
  '30 -31 0 -20.05 0 -20.05 0 -30 0',
  '150 -28 0 -20.21 0 -20.21 0 -29 0',
].join('\n');

test.describe('the bench’s equipment, without JavaScript', () => {
  test('a part from a Touchstone file becomes a path, which follows its next revision', async ({ login }) => {
    const page = await login('tester', { javaScriptEnabled: false });
    const ending = randomUUID().slice(0, 6).toUpperCase();
    const [part, path] = [`A-${ending}`, `T-${ending}`];
    await page.goto(paths.pathParts());
    await page.getByText('Enter a path part').click();
    await page.getByLabel('Number', { exact: true }).fill(part);
    await page.getByLabel('What it is').fill('20 dB pad');
    await page.getByLabel('Expanded uncertainty, dB').fill('0,05');
    await page.getByRole('button', { name: 'Enter the path part' }).click();
    await expect(page.getByLabel('Typed')).toHaveAccessibleDescription(/The table has no rows/);
    await page
      .getByLabel('Or from a file')
      .setInputFiles({ name: 'pad.s2p', mimeType: 'text/plain', buffer: Buffer.from(pad) });
    await page.getByRole('button', { name: 'Enter the path part' }).click();
    await expect(page.getByRole('heading', { level: 1, name: part })).toBeVisible();
    await expect(page.getByRole('region', { name: 'Loss table' })).toContainText('20.210 dB');
    await expect(page.getByRole('link', { name: 'pad.s2p' })).toBeVisible();

    await page.goto(paths.signalPaths());
    await page.getByText('Build a path').click();
    await page.getByLabel('Number', { exact: true }).fill(path);
    await page.getByLabel('What it is').fill('Through 20 dB');
    await page.getByLabel('Part 1').selectOption(part);
    await page.getByRole('button', { name: 'Build the path' }).click();
    const losses = page.getByRole('table', { name: `Loss of ${path} at the bands` });
    await expect(losses.getByRole('row', { name: /^6 m/ })).toContainText('20.10 dB');

    await page.goto(paths.pathPart(part));
    await page.getByText('Make revision 2').first().click();
    await page.getByLabel('Typed').fill('1 MHz 19.5\n150 MHz 19.5');
    await page.getByRole('button', { name: 'Make revision 2' }).click();
    await expect(page.getByText(`Revision 2 applies from now on, and in ${path}.`)).toBeVisible();
    await page.goto(paths.signalPath(path));
    await expect(losses.getByRole('row', { name: /^6 m/ })).toContainText('19.50 dB');
    await page.getByText(`Take ${path} out of use`).click();
    await page.getByRole('button', { name: 'Take it out of use' }).click();
    await expect(page.getByRole('button', { name: `Put ${path} back in use` })).toBeVisible();
  });

  test('a calibration that is not believed comes back with what was typed', async ({ login }) => {
    const page = await login('tester', { javaScriptEnabled: false });
    await page.goto(paths.instrument('PM-2'));
    await page.getByText('Make revision 2').first().click();
    await page.getByLabel('Accuracy: Power', { exact: true }).fill('3 % + 2 mA');
    await page.getByLabel('Laboratory').fill('Another laboratory');
    await page.getByRole('button', { name: 'Make revision 2' }).click();
    await expect(page.getByLabel('Accuracy: Power', { exact: true })).toHaveAccessibleDescription(
      /mA does not fit power: use dB, percent or W/,
    );
    await expect(page.getByLabel('Laboratory')).toHaveValue('Another laboratory');
  });

  test('a slip of the hand in the daily check is asked about before it stops anything', async ({ login }) => {
    const page = await login('tester', { javaScriptEnabled: false });
    await page.goto(paths.checks());
    const check = page.getByRole('listitem').filter({ hasText: 'Kept rig, key down on 20 m' }).first();
    await check.getByLabel('What the meter shows').fill('3.45 dBm');
    await check.getByRole('button', { name: 'Judge it' }).click();
    await expect(check.getByLabel('What the meter shows')).toHaveAccessibleDescription(
      /more than ten times its band/,
    );
    await check.getByLabel('What the meter shows').fill('-3.40 dBm');
    await check.getByRole('button', { name: 'Judge it' }).click();
    await expect(page.getByText('R-1 is inside its band')).toBeVisible();
    await expect(check.getByText(/good today, off by/)).toBeVisible();
  });
});
