import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from '@playwright/test';
import { test as base, expect } from '@playwright/test';
import type { AxeResults } from 'axe-core';
import { DEMO_PASSWORD } from '../../playwright.config';

export const PEOPLE = {
  firmware: 'ines@norrhavn.example',
  qa: 'johanna@norrhavn.example',
  support: 'mira@norrhavn.example',
  admin: 'rosa@norrhavn.example',
} as const;

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/**
 * Every test fails on an error in the console, which includes reports of the content security policy, and on a request that leaves
 * the host. `allowed`: messages a test brings about on purpose.
 */
export const test = base.extend<{ allowed: RegExp[] }>({
  allowed: [[], { option: true }],
  page: async ({ page, allowed, baseURL }, use) => {
    const faults: string[] = [];
    page.on('console', (message) => {
      if (message.type() === 'error' && !allowed.some((text) => text.test(message.text())))
        faults.push(message.text());
    });
    page.on('pageerror', (error) => faults.push(String(error)));
    page.on('request', (request) => {
      if (!request.url().startsWith(baseURL!) && !/^(data|blob):/.test(request.url()))
        faults.push(`a request to ${request.url()}`);
    });
    await use(page);
    expect(faults).toEqual([]);
  },
});

export { expect };

export async function signIn(page: Page, role: keyof typeof PEOPLE = 'firmware', to?: string): Promise<void> {
  await page.goto(to === undefined ? '/sign-in' : `/sign-in?to=${encodeURIComponent(to)}`);
  await page.getByLabel('E-mail').fill(PEOPLE[role]);
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.locator('lw-shell')).toBeVisible();
}

/** No violation of any rule of axe-core on the page as it stands. */
export async function expectAccessible(page: Page): Promise<void> {
  await page.evaluate(AXE);
  const results = await page.evaluate(() =>
    (globalThis as unknown as { axe: { run(): Promise<AxeResults> } }).axe.run(),
  );
  const told = results.violations.map(({ id, nodes }) => `${id}: ${nodes.map((n) => n.html).join(' | ')}`);
  expect(told).toEqual([]);
}
