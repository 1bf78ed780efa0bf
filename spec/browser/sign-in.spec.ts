import { DEMO_PASSWORD } from '../../playwright.config';
import { expect, expectAccessible, PEOPLE, signIn, test } from './workspace';

test('asks who somebody is before it shows anything, and then goes where they wanted', async ({ page }) => {
  await page.goto('/devices');
  await expect(page).toHaveURL(/\/sign-in\?to=%2Fdevices/);
  await expectAccessible(page);
  await page.getByLabel('E-mail').fill(PEOPLE.firmware);
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).toHaveURL(/\/devices$/);
});

test('stays signed in after a reload and is signed out for good', { tag: '@once' }, async ({ page }) => {
  await signIn(page);
  await page.reload();
  await expect(page.locator('lw-shell')).toBeVisible();
  await page.evaluate(() => fetch('/api/session', { method: 'DELETE' }));
  await page.evaluate(() => localStorage.clear());
  await page.reload();
  await expect(page).toHaveURL(/\/sign-in/);
});

test.describe('with a wrong password', () => {
  test.use({ allowed: [/status of 40[13]/] });
  test('says so without telling which accounts exist', { tag: '@once' }, async ({ page }) => {
    const answers: string[] = [];
    for (const email of [PEOPLE.firmware, 'nobody@norrhavn.example']) {
      await page.goto('/sign-in');
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('Password').fill('not the password');
      await page.getByRole('button', { name: 'Sign in' }).click();
      answers.push((await page.getByRole('alert').textContent()) ?? '');
    }
    expect(answers[0]).not.toBe('');
    expect(answers[1]).toBe(answers[0]);
  });
});
