import { readFileSync } from 'node:fs';
import type { Page } from '@playwright/test';
import { expect, expectAccessible, signIn, test } from './workspace';

async function openTape(page: Page, subject: string): Promise<void> {
  const row = page.locator('tbody tr', { hasText: subject }).first();
  await row.getByRole('link').first().click();
  await expect(page.getByRole('application')).toBeVisible();
}

test('the tape is read by keys, and the address brings a colleague to the same place', async ({
  page,
  context,
}) => {
  await signIn(page);
  await openTape(page, 'Late reply after warm reset');
  await expectAccessible(page);
  const tape = page.getByRole('application');
  await tape.focus();
  await page.keyboard.press('n');
  await expect(page.locator('lw-details-drawer').first()).toContainText('15.62');
  await expect(page.locator('lw-details-drawer').first()).toContainText('violation');
  await page.keyboard.press('h');
  await expect(page.locator('.scale')).toHaveText('10 px/bit');
  await page.keyboard.press('a');
  await page.keyboard.press('Shift+ArrowRight');
  await page.keyboard.press('b');
  await expect(page.locator('lw-read-out-bar')).toContainText('Span');
  await page.keyboard.press('.');
  await expect(page).toHaveURL(/sel=packet/);
  const label = await tape.getAttribute('aria-label');
  await expect(page).toHaveURL(/w=.*a=.*b=|a=.*b=.*w=/);

  const other = await context.newPage();
  await other.goto(page.url());
  await expect(other.getByRole('application')).toHaveAttribute('aria-label', label!);
  await expect(other.getByRole('heading', { name: /^Packet \d+$/ })).toBeVisible();
  await other.close();
});

test('tables and tape go together, and find leads to values, rules and times', async ({ page }) => {
  await signIn(page, 'qa');
  await openTape(page, 'Wheel, line by line');
  for (const name of ['Characters', 'Findings', 'Strokes', 'Lines', 'Packets']) {
    await page.getByRole('tab', { name: new RegExp(`^${name}`) }).click();
    await expect(page.getByRole('grid', { name })).toBeVisible();
    await expectAccessible(page);
  }
  await page.locator('[data-row="5"]').click();
  await expect(page.getByRole('heading', { name: 'Packet 4' })).toBeVisible();
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { name: 'Packet 5' })).toBeVisible();
  await page.getByRole('button', { name: 'Find on the tape' }).click();
  const find = page.getByRole('textbox', { name: 'Find on the tape' });
  await find.fill('4D 5A');
  await find.press('Enter');
  await expect(page.getByRole('heading', { name: /^Character \d+$/ })).toBeVisible();
  await find.fill('HSK-1');
  await find.press('Enter');
  await expect(page.getByRole('heading', { name: 'Reply latency' })).toBeVisible();
  await find.fill('what?');
  await find.press('Enter');
  await expect(page.getByText('Write 4D, 4D 33')).toBeVisible();
});

test('all resets stand one below the other, and one of them opens', async ({ page }) => {
  await signIn(page);
  await openTape(page, 'Warm resets, 24 times');
  await page.getByRole('button', { name: 'All resets' }).click();
  await expect(page.getByText('24 resets, sorted by')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'latency' }).click();
  await page.locator('lw-reset-stack canvas').click({ position: { x: 300, y: 70 + 7 } });
  await expect(page.getByRole('heading', { name: 'Reset 14 of 24' })).toBeVisible();
  await expect(page.locator('lw-details-drawer')).toContainText('15.62');
});

test('a check is made again with another rulebook and says what changed', async ({ page }) => {
  await signIn(page);
  // A capture of its own: the others count on the check they have.
  await openTape(page, 'Oscillator not trimmed');
  await page.getByRole('tab', { name: 'Figures' }).click();
  await expect(page.getByText('What this capture can show')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Check again' }).click();
  await page.getByLabel('Rulebook').selectOption('host-limits');
  await page.getByRole('button', { name: 'Check', exact: true }).click();
  await expect(page.getByText(/Since check \d+, /)).toBeVisible({ timeout: 20_000 });
  await expect(page.locator('lw-title-block')).toContainText('Checked against Host limits');
  await expectAccessible(page);
});

test(
  'log, result and packets are downloaded without a token in their address',
  { tag: '@once' },
  async ({ page }) => {
    await signIn(page, 'support');
    await openTape(page, 'Late reply after warm reset');
    for (const [name, part] of [
      ['Decoded log, text', 'HSK-1'],
      ['Result, JSON', '"protocol"'],
      ['Packets, CSV', 'dx'],
    ]) {
      await page.getByRole('button', { name: 'Download' }).click();
      const [download] = await Promise.all([
        page.waitForEvent('download'),
        page.getByRole('menuitem', { name }).click(),
      ]);
      expect(download.url()).not.toMatch(/eyJ/);
      expect(readFileSync(await download.path(), 'utf8')).toContain(part);
    }
  },
);

test('the pointer zooms at its place, pans and selects', { tag: '@once' }, async ({ page }) => {
  await signIn(page);
  await openTape(page, 'Late reply after warm reset');
  const tape = page.getByRole('application');
  const before = await tape.getAttribute('aria-label');
  const box = (await tape.boundingBox())!;
  await page.mouse.move(box.x + 500, box.y + 150);
  await page.mouse.wheel(0, -600);
  await expect(tape).not.toHaveAttribute('aria-label', before!);
  const zoomed = await tape.getAttribute('aria-label');
  await page.mouse.down();
  await page.mouse.move(box.x + 300, box.y + 150, { steps: 4 });
  await page.mouse.up();
  await expect(tape).not.toHaveAttribute('aria-label', zoomed!);
});

test('what is not there says so, and nothing breaks', async ({ page }) => {
  await signIn(page);
  await openTape(page, 'Customer says: not found by the host');
  await expect(page.getByText('No packets.')).toBeVisible();
  await expectAccessible(page);
  await page.goto('/captures');
  await page
    .locator('tbody tr', { hasText: 'Customer capture, second try' })
    .getByRole('link')
    .first()
    .click();
  await expect(page.getByText('Lines not mapped yet')).toBeVisible();
  await expectAccessible(page);
});

test.describe('an address that leads nowhere', () => {
  test.use({ allowed: [/status of 404/] });
  test('says what is missing', { tag: '@once' }, async ({ page }) => {
    await signIn(page, 'firmware', '/captures/LW-9999');
    await expect(page.getByRole('alert')).toBeVisible();
    await page.goto('/nowhere');
    await expect(page.getByText('Nothing stands at this address.')).toBeVisible();
    await expectAccessible(page);
  });
});

test('what happened between the dividers goes into a new decode', { tag: '@once' }, async ({ page }) => {
  await signIn(page);
  await openTape(page, 'Reset and reference strokes');
  const number = new URL(page.url()).pathname;
  await page.goto(`${number}?a=0.2&b=0.9`);
  await page.getByRole('button', { name: 'Say what it is' }).click();
  await expectAccessible(page);
  await page.getByLabel('What happened').selectOption('excluded');
  await page.getByRole('button', { name: 'Decode with it' }).click();
  await expect(page.getByRole('alert')).toContainText('Say why');
  await page.getByLabel('What happened').selectOption('rest');
  await page.getByRole('button', { name: 'Decode with it' }).click();
  await page.getByRole('tab', { name: 'Checks 2' }).click({ timeout: 20_000 });
  await expect(page.getByText(/decode 2, shown/)).toBeVisible();
});
