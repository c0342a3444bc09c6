import { mkdir } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { BenchDriver } from './bench-driver.ts';
import { hasChromium, startChromium } from './chromium.ts';
import { SAMPLE, type ServedWindow, serveWindow } from './served-window.ts';

/** Folder for pictures of the window; named in NEEDLEBEAT_PICTURES, else none are taken. */
const named = process.env.NEEDLEBEAT_PICTURES;
if (!named) console.info('Pictures of the window left out: name a folder for them in NEEDLEBEAT_PICTURES.');

describe.skipIf(!named || !hasChromium())('pictures of the window with the sample', () => {
  const folder = resolve(named ?? '.');
  let browser: Browser;
  let served: ServedWindow;
  let bench: BenchDriver;

  beforeAll(async () => {
    await mkdir(folder, { recursive: true });
    browser = await startChromium();
    served = await serveWindow(SAMPLE.session);
    bench = await BenchDriver.enter(browser, served.address, { width: 1280, height: 800 });
  });

  afterAll(async () => {
    await bench?.leave();
    await browser?.close();
    await served?.close();
  });

  const picture = async (name: string) => {
    await bench.page.waitForFunction(() => !document.querySelector('.reading, .notice'), null, { timeout: 60_000 });
    await bench.page.waitForTimeout(800);
    await bench.page.screenshot({ path: join(folder, `${name}.png`) });
  };

  test('following the bar, dark', { timeout: 600_000 }, async () => {
    await bench.measured(11, 500_000);
    await bench.page.emulateMedia({ colorScheme: 'dark' });
    await bench.seeSheet('View');
    await bench.barFound();
    await bench.page.getByRole('button', { name: 'Follow the whole recording' }).click();
    await bench.page.waitForFunction(
      () => Number(document.querySelector<HTMLProgressElement>('.work-line progress')?.value) > 0.55,
      null,
      { timeout: 300_000 },
    );
    await picture('follow');
    await bench.page.locator('.work-line').waitFor({ state: 'detached', timeout: 300_000 });
    await bench.segments(11);
  });

  test('a segment, and the field', { timeout: 600_000 }, async () => {
    await bench.page.emulateMedia({ colorScheme: 'light' });
    await bench.selectSegment('s05');
    await bench.seeSheet('Segment');
    await bench.page.getByRole('img', { name: /with the fit/ }).waitFor();
    await picture('segment');
    await bench.seeSheet('Field');
    await expect.poll(() => bench.page.locator('tr[data-row]').count()).toBe(11);
    await picture('field');
  });
});
