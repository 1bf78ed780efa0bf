import { expect, expectAccessible, signIn, test } from './workspace';

test('find leads to a capture and the keys are written down', async ({ page }) => {
  await signIn(page);
  await expect(page.locator('tbody tr').first()).toBeVisible();
  await page.keyboard.press('?');
  await expect(page.getByRole('heading', { name: 'Keys' })).toBeVisible();
  await expectAccessible(page);
  await page.keyboard.press('Escape');
  await page.keyboard.press('Control+k');
  await page.getByRole('combobox', { name: 'Find' }).fill('late reply');
  await expect(page.getByRole('option', { name: /Late reply after warm reset/ })).toBeVisible();
  await expectAccessible(page);
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { name: 'Late reply after warm reset' })).toBeVisible();
});

test('the theme is chosen by hand and stays', async ({ page }) => {
  await signIn(page);
  await page.getByRole('button', { name: /own account/ }).click();
  await page.getByRole('menuitem', { name: 'Theme' }).click();
  await page.getByRole('menuitemradio', { name: /Dark/ }).click();
  await page.reload();
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'dark');
  await page.goto('/account');
  await expectAccessible(page);
});

test(
  'a second tab hears of a decode that the first one asked for',
  { tag: '@once' },
  async ({ page, context }) => {
    await signIn(page);
    await page.locator('#files').setInputFiles({
      name: 'heard.csv',
      mimeType: 'text/csv',
      buffer: Buffer.from('time,data,rts\n0,1,0\n0.5,1,1\n0.512,0,1\n0.513,1,1\n0.6,1,1\n'),
    });
    const other = await context.newPage();
    await other.goto('/captures');
    const row = other.locator('tbody tr', { hasText: 'heard.csv' }).first();
    await expect(row).toContainText('Map the lines');
    await page.locator('lw-upload-row').getByRole('button', { name: 'Map the lines' }).click();
    await page.getByRole('button', { name: 'Use this mapping' }).click();
    await expect(row.locator('lw-tiny-tape')).toBeVisible({ timeout: 20_000 });
    await other.close();
  },
);
