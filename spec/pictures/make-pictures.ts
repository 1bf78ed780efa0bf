/** Takes the README's pictures from a fresh demo workspace: `npm run pictures` after a build. */
import { fileURLToPath } from 'node:url';
import type { Page } from '@playwright/test';
import { startDemoServer } from '../demo-server';
import { openBrowser, signInTo } from '../open-browser';

const PORT = 4793;
const FOLDER = fileURLToPath(new URL('./', import.meta.url));
const SETTLE_MS = 900;

async function openTape(page: Page, url: string, subject: string): Promise<void> {
  await page.goto(`${url}/captures`);
  await page.locator('tbody tr', { hasText: subject }).first().getByRole('link').first().click();
  await page.getByRole('application').waitFor();
  const legend = page.locator('lw-legend').getByRole('button', { name: 'Close' });
  if (await legend.isVisible()) await legend.click();
  await page.waitForTimeout(SETTLE_MS);
}

const server = await startDemoServer(PORT);
const browser = await openBrowser();
try {
  for (const colorScheme of ['light', 'dark'] as const) {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, colorScheme });
    const page = await context.newPage();
    const shoot = async (name: string): Promise<void> => {
      await page.waitForTimeout(SETTLE_MS);
      await page.screenshot({ path: `${FOLDER}${name}.png` });
    };
    await signInTo(page, server.url, 'ines@norrhavn.example', server.password);
    if (colorScheme === 'light') {
      await shoot('captures');
      await openTape(page, server.url, 'Late reply after warm reset');
      await page.getByRole('application').focus();
      await page.keyboard.press('n');
      await page.keyboard.press('h');
      await page.keyboard.press('n');
      await shoot('tape-handshake');
      await openTape(page, server.url, 'Warm resets, 24 times');
      await page.getByRole('button', { name: 'All resets' }).click();
      await shoot('tape-resets');
    } else {
      await openTape(page, server.url, 'Late reply after warm reset');
      await shoot('tape-dark');
    }
    await context.close();
  }
} finally {
  await browser.close();
  server.stop();
}
