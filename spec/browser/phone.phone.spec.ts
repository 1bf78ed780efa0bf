import type { Page } from '@playwright/test';
import { expect, expectAccessible, signIn, test } from './workspace';

async function expectNoSideways(page: Page): Promise<void> {
  const [inner, scroll] = await page.evaluate(() => [innerWidth, document.documentElement.scrollWidth]);
  expect(scroll).toBeLessThanOrEqual(inner);
}

test('captures and a tape are read on a phone', async ({ page }) => {
  await signIn(page);
  await expect(page.locator('tbody tr').first()).toBeVisible();
  await expectNoSideways(page);
  await expectAccessible(page);
  await page
    .locator('tbody tr', { hasText: 'Late reply after warm reset' })
    .getByRole('link')
    .first()
    .click();
  await expect(page.getByRole('application')).toBeVisible();
  await expectNoSideways(page);
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Next finding' }).click();
  await expect(page.locator('lw-details-drawer')).toContainText('15.62');
  for (const name of ['Packets', 'Motion', 'Figures']) {
    await page.getByRole('tab', { name: new RegExp(`^${name}`) }).click();
    await expectNoSideways(page);
    await expectAccessible(page);
  }
});

test('mapping and devices fit a phone', async ({ page }) => {
  await signIn(page);
  const row = page.locator('tbody tr', { hasText: 'Customer capture, second try' });
  await row.getByRole('button', { name: 'Map the lines' }).click();
  await expect(page.getByRole('heading', { name: 'Map the lines' })).toBeVisible();
  await expect(page.getByText('With this mapping')).toBeVisible();
  // A drawer is a page of its own here.
  const box = await page.locator('lw-map-drawer').boundingBox();
  expect(box).toMatchObject({ x: 0, y: 0, width: 390 });
  expect(box!.height).toBeGreaterThan(700);
  await expectNoSideways(page);
  await expectAccessible(page);
  await page.goto('/devices');
  await expect(page.getByRole('link', { name: 'Trackball proto C' })).toBeVisible();
  await expectNoSideways(page);
  await expectAccessible(page);
});
