import { expect, expectAccessible, signIn, test } from './workspace';

test('a device gets a build, and people of support only look', async ({ page }, info) => {
  await signIn(page, 'firmware', '/devices');
  await expectAccessible(page);
  await page.getByRole('button', { name: 'New device' }).click();
  await page.getByLabel('Name').fill(`Trackball ${info.project.name}`);
  await page.getByLabel('Kind').selectOption('trackball');
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Make the device' }).click();
  await expect(page.getByText('No builds yet.')).toBeVisible();
  await page.getByRole('button', { name: 'New build' }).click();
  await page.getByLabel('Name').fill('0.1.0');
  await page.getByRole('button', { name: 'Make the build' }).click();
  await expect(page.getByText('No captures of this build yet.')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('link', { name: `Trackball ${info.project.name}` }).click();
  await expect(page.getByRole('link', { name: '0.1.0' })).toBeVisible();
  await expectAccessible(page);
});

test('support sees devices and has no button it may not use', async ({ page }) => {
  await signIn(page, 'support', '/devices');
  await page.getByRole('link', { name: 'Trackball proto C' }).click();
  await expect(page.getByRole('heading', { name: 'Trackball proto C' })).toBeVisible();
  await expect(page.getByRole('button', { name: 'New build' })).toHaveCount(0);
  await page.getByRole('link', { name: '2.3.0-rc4' }).click();
  await expect(page.getByText('Late reply after warm reset')).toBeVisible();
  await expectAccessible(page);
});
