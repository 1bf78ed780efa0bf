import { expect, expectAccessible, signIn, test } from './workspace';

test.describe('people', () => {
  test('an admin makes an account, and its link lets a person in', async ({ page, browser }, info) => {
    await signIn(page, 'admin', '/admin/people');
    await expectAccessible(page);
    const email = `noor-${info.project.name}@norrhavn.example`;
    await page.getByRole('button', { name: 'New account' }).click();
    await page.getByLabel('Name').fill('Noor Example');
    await page.getByLabel('E-mail').fill(email);
    await page.getByLabel('Role').selectOption('qa');
    await page.getByRole('button', { name: 'Make the account' }).click();
    const link = await page.getByLabel('Link to choose a password').inputValue();
    await expectAccessible(page);

    const other = await browser.newPage();
    await other.goto(`${new URL(page.url()).origin}${new URL(link).pathname}${new URL(link).hash}`);
    await other.getByLabel('New password').fill('quite a long password');
    await other.getByLabel('Once more').fill('quite a long password');
    await other.getByRole('button', { name: 'Choose this password' }).click();
    await other.getByRole('link', { name: 'Sign in' }).click();
    await other.getByLabel('E-mail').fill(email);
    await other.getByLabel('Password').fill('quite a long password');
    await other.getByRole('button', { name: 'Sign in' }).click();
    await expect(other.locator('lw-shell')).toBeVisible();
    await other.close();
  });

  test('others do not see it, not even by its address', async ({ page }) => {
    await signIn(page, 'support', '/admin/people');
    await expect(page.getByText('Your role, support, cannot open this.')).toBeVisible();
    await expect(page.getByRole('link', { name: 'Admin' })).toHaveCount(0);
    await expectAccessible(page);
  });
});
