import { readFileSync } from 'node:fs';
import { expect, expectAccessible, signIn, test } from './workspace';

const SAMPLE = 'samples/healthy-m.vcd';

test('from the file to the tape: upload, map, decode, read', async ({ page }) => {
  await signIn(page);
  await page.locator('#files').setInputFiles(SAMPLE);
  const upload = page.locator('lw-upload-row', { hasText: 'healthy-m.vcd' });
  await expect(upload).toContainText('received and sealed');
  await upload.getByRole('button', { name: 'Map the lines' }).click();

  const drawer = page.locator('lw-map-drawer');
  await expect(drawer.getByText('answered “M”')).toBeVisible();
  await expectAccessible(page);
  // The other polarity of RTS turns the handshake over, and the excerpt says so before anything is stored.
  await drawer
    .getByRole('group', { name: 'Polarity of bench.rts' })
    .getByRole('button', { name: 'Logic' })
    .click();
  await expect(drawer.getByText('answered “M”')).toHaveCount(0);
  await drawer
    .getByRole('group', { name: 'Polarity of bench.rts' })
    .getByRole('button', { name: 'Line' })
    .click();
  await expect(drawer.getByText('answered “M”')).toBeVisible();

  await drawer.getByRole('tab', { name: 'About' }).click();
  await drawer.getByLabel('Subject').fill('Seen from the browser');
  await drawer.getByLabel('Unit serial number').fill('U-17');
  await expectAccessible(page);
  await drawer.getByRole('tab', { name: 'File' }).click();
  await expectAccessible(page);
  await drawer.getByRole('button', { name: 'Use this mapping' }).click();

  const row = page.locator('tr', { hasText: 'Seen from the browser' }).first();
  await expect(row.locator('lw-tiny-tape')).toBeVisible({ timeout: 20_000 });
  await row.getByRole('link').click();
  await expect(page.getByRole('application')).toBeVisible();
  await expect(page.getByRole('heading', { name: 'Seen from the browser' })).toBeVisible();
});

test.describe('what cannot be taken', () => {
  test.use({ allowed: [/status of 4(13|15|22)/] });

  test('is refused with the reason, and a file that cannot be read says where', async ({ page }) => {
    await signIn(page);
    await page.locator('#files').setInputFiles([
      { name: 'empty.csv', mimeType: 'text/csv', buffer: Buffer.alloc(0) },
      {
        name: 'torn.csv',
        mimeType: 'text/csv',
        buffer: Buffer.from('A letter, and no capture.\nNothing was recorded here.\n'),
      },
    ]);
    await expect(page.locator('lw-upload-row', { hasText: 'empty.csv' })).toContainText('The file is empty.');
    const torn = page.locator('lw-upload-row', { hasText: 'torn.csv' });
    await torn.getByRole('button', { name: 'Map the lines' }).click();
    await expect(page.locator('lw-map-drawer').getByRole('alert')).toBeVisible();
    await expectAccessible(page);
  });
});

test('several files get one map', { tag: '@once' }, async ({ page }) => {
  await signIn(page, 'qa');
  const bytes = readFileSync(SAMPLE);
  await page
    .locator('#files')
    .setInputFiles(['one.vcd', 'two.vcd'].map((name) => ({ name, mimeType: 'text/plain', buffer: bytes })));
  await page.getByRole('button', { name: 'Map all with one line map' }).click();
  await page.getByRole('button', { name: 'Use this mapping for all 2' }).click();
  for (const name of ['one.vcd', 'two.vcd']) {
    const row = page.locator('tbody tr', { hasText: name }).first();
    await expect(row.locator('lw-tiny-tape')).toBeVisible({ timeout: 20_000 });
  }
});

test('the list is searched, filtered and worked by keys', async ({ page }) => {
  await signIn(page);
  await expect(page.locator('tbody tr').first()).toBeVisible();
  await expectAccessible(page);
  await page.locator('tbody tr').first().focus();
  await page.keyboard.press('/');
  await page.keyboard.type('late reply');
  await expect(page).toHaveURL(/search=late/);
  await expect(page.locator('tbody tr')).toHaveCount(1);
  await page.getByLabel('Verdict').selectOption('pass');
  await expect(page.getByText('Nothing matches.')).toBeVisible();
  await page.getByRole('link', { name: 'Show all captures' }).click();
  await page.locator('tbody tr').first().focus();
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('Space');
  await expect(page.getByText('1 marked.')).toBeVisible();
});

test('people delete only what is theirs, and are asked before', { tag: '@once' }, async ({ page }) => {
  await signIn(page, 'support');
  await page.locator('#files').setInputFiles({
    name: 'to-be-deleted.vcd',
    mimeType: 'text/plain',
    buffer: readFileSync(SAMPLE),
  });
  const row = page.locator('tbody tr', { hasText: 'to-be-deleted.vcd' }).first();
  await row.getByRole('button', { name: /More/ }).click();
  await page.getByRole('menuitem', { name: 'Delete' }).click();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Delete' }).click();
  await expect(page.locator('tbody tr', { hasText: 'to-be-deleted.vcd' })).toHaveCount(0);
  const others = page.locator('tbody tr', { hasText: 'Late reply after warm reset' });
  await others.getByRole('button', { name: /More/ }).click();
  await expect(page.getByRole('menuitem', { name: 'Download the file' })).toBeVisible();
  await expect(page.getByRole('menuitem', { name: 'Delete' })).toHaveCount(0);
});
