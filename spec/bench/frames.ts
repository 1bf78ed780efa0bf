/**
 * Missed frames of a continuous pan and zoom on a ten-minute capture, at 1440×900 and device pixel ratios 1 and 2:
 * `npm run bench:frames` after a build. A frame is missed where the stamps handed to requestAnimationFrame, in the thread that
 * paints, lie further apart than one and a half frames of an idle page. Exit code 1 where 5 % or more are missed.
 */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from '@playwright/test';
import { compose } from '#shared/composer/compose';
import type { Script, Step } from '#shared/composer/script';
import { writeVcd } from '#shared/composer/write-vcd';
import { startDemoServer } from '../demo-server';
import { openBrowser, signInTo } from '../open-browser';

const PORT = 4794;
const MINUTES = 10;
const MOVE_MS = 8000;
const SKIPPED = 20;
const MOST_MISSED = 0.05;

function tenMinutes(): Script {
  const steps: Step[] = [
    { do: 'wait', ms: 500 },
    { do: 'reset', widthMs: 104.2, latencyMs: 12 },
  ];
  // A figure of 1000 packets lasts 25 s at 40 packets a second.
  for (let i = 0; i < (MINUTES * 60) / 25; i++) {
    steps.push({
      do: 'draw',
      figure: i % 2 === 0 ? 'eight' : 'spiral',
      size: 2000,
      packets: 960,
      angle: i * 15,
    });
    steps.push({ do: 'wait', ms: 1000 });
  }
  return { name: 'ten minutes of motion', protocol: 'M', jitterPercent: 1, steps };
}

interface Frames {
  readonly count: number;
  readonly missed: number;
}

async function measure(
  browser: Browser,
  url: string,
  password: string,
  ratio: number,
  file: string,
): Promise<Frames> {
  const context = await browser.newContext({
    viewport: { width: 1440, height: 900 },
    deviceScaleFactor: ratio,
  });
  const page = await context.newPage();
  await signInTo(page, url, 'ines@norrhavn.example', password);
  if (ratio === 1) {
    await page.locator('#files').setInputFiles(file);
    const upload = page.locator('lw-upload-row', { hasText: 'ten-minutes.vcd' });
    await upload.getByRole('button', { name: 'Map the lines' }).click();
    await page.getByRole('button', { name: 'Use this mapping' }).click();
  }
  const row = page.locator('tbody tr', { hasText: 'ten-minutes.vcd' }).first();
  await row.locator('lw-tiny-tape').waitFor({ timeout: 60_000 });
  await row.getByRole('link').first().click();
  const tape = page.getByRole('application');
  await tape.waitFor();
  await page.waitForTimeout(1500);
  // The loader of these scripts wraps inner functions in one that the page does not have.
  await page.evaluate('globalThis.__name = (f) => f');
  const stamps = await page.evaluate(
    ({ moveMs }) =>
      new Promise<number[]>((resolve) => {
        const canvas = document.querySelector('lw-tape-canvas')!;
        const box = canvas.getBoundingClientRect();
        const stamps: number[] = [];
        const begin = performance.now();
        const step = (now: number): void => {
          stamps.push(now);
          const share = (performance.now() - begin) / moveMs;
          const at = { clientX: box.left + 500, clientY: box.top + 200, bubbles: true, cancelable: true };
          // In and out over all scales, and sideways all the time.
          const deltaY = Math.sin(share * Math.PI * 4) * -60;
          canvas.dispatchEvent(new WheelEvent('wheel', { ...at, deltaY }));
          canvas.dispatchEvent(new WheelEvent('wheel', { ...at, deltaX: 6 }));
          if (share < 1) requestAnimationFrame(step);
          else resolve(stamps);
        };
        requestAnimationFrame(step);
      }),
    { moveMs: MOVE_MS },
  );
  await context.close();
  const gaps = stamps
    .slice(SKIPPED)
    .map((stamp, i, all) => (i === 0 ? 0 : stamp - all[i - 1]))
    .slice(1);
  const frame = [...gaps].sort((a, b) => a - b)[Math.floor(gaps.length * 0.1)];
  const missed = gaps.reduce((sum, gap) => sum + Math.max(0, Math.round(gap / frame) - 1), 0);
  return { count: gaps.length + missed, missed };
}

const folder = mkdtempSync(join(tmpdir(), 'linewitness-frames-'));
const file = join(folder, 'ten-minutes.vcd');
writeFileSync(file, [...writeVcd(compose(tenMinutes()))].join(''));
const server = await startDemoServer(PORT);
const browser = await openBrowser();
try {
  for (const ratio of [1, 2]) {
    const { count, missed } = await measure(browser, server.url, server.password, ratio, file);
    const share = missed / count;
    process.stdout.write(
      `device pixel ratio ${ratio}: ${missed} of ${count} frames missed, ${(share * 100).toFixed(1)} %\n`,
    );
    if (share >= MOST_MISSED) process.exitCode = 1;
  }
} finally {
  await browser.close();
  server.stop();
  rmSync(folder, { recursive: true, force: true });
}
