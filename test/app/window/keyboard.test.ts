import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Session } from '../../../app/contract.ts';
import { BenchDriver } from './bench-driver.ts';
import { hasChromium, startChromium } from './chromium.ts';
import { SAMPLE, type ServedWindow, serveWindow } from './served-window.ts';

describe.skipIf(!hasChromium())('the window without a pointer', { timeout: 300_000 }, () => {
  let browser: Browser;
  let served: ServedWindow;
  let bench: BenchDriver;
  let folder: string;

  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'needlebeat-keyboard-'));
    browser = await startChromium();
    served = await serveWindow(SAMPLE.recording);
    // As large as a window of 1440 by 900 at 125 %.
    bench = await BenchDriver.enter(browser, served.address, { width: 1152, height: 720 });
    await bench.page.locator('.picture-stage canvas[aria-label^="Frame"]').waitFor();
  });

  afterAll(async () => {
    await bench?.leave();
    await browser?.close();
    await served?.close();
    await rm(folder, { recursive: true, force: true });
  });

  test('a region is put in the middle with R and Enter, and moved and resized with the arrows', async () => {
    await bench.press('r', 'Enter');
    const x = Number(await bench.entry('region-x'));
    const width = Number(await bench.entry('region-width'));
    await bench.page.locator('[data-entry="region"]').focus();
    await bench.press('ArrowLeft', 'ArrowLeft', 'Shift+ArrowLeft', 'Alt+Shift+ArrowLeft');
    await expect.poll(async () => Number(await bench.entry('region-x'))).toBe(x - 12);
    await expect.poll(async () => Number(await bench.entry('region-width'))).toBe(width - 10);
  });

  test('moving the region in a row is one step to undo', async () => {
    const x = Number(await bench.entry('region-x'));
    await bench.press('Control+z');
    await expect.poll(async () => Number(await bench.entry('region-x'))).not.toBe(x);
    await bench.press('Control+Shift+z');
    await expect.poll(async () => Number(await bench.entry('region-x'))).toBe(x);
  });

  test('the cursor goes by frames and by seconds', async () => {
    const where = () => bench.page.locator('.picture-tools .where b').innerText();
    await bench.page.locator('.lanes').focus();
    await bench.press('ArrowRight');
    await expect.poll(where).toMatch(/^0\.0[1-9]\d s$/);
    await bench.press('Shift+ArrowRight', 'Shift+ArrowRight');
    await expect.poll(where).toMatch(/^2\.0\d\d s$/);
    await bench.press('Shift+ArrowLeft');
    await expect.poll(where).toMatch(/^1\.0\d\d s$/);
  });

  test('a segment is marked with B and E, its current typed, its edge moved', async () => {
    await bench.press('b', ...Array<string>(4).fill('Shift+ArrowRight'), 'e');
    const words = async () => (await bench.segments(1))[0];
    await expect.poll(() => words()).toContain('no current yet');
    await bench.press('c');
    await expect.poll(() => bench.focused()).toBe('current');
    await bench.page.keyboard.type('\u22120,05');
    await bench.press('Enter');
    await expect.poll(words).toContain('\u22120.05 A');
    const end = bench.page.getByRole('slider', { name: 'End of s01' });
    const before = Number(await end.getAttribute('aria-valuenow'));
    await end.focus();
    await bench.press('Shift+ArrowRight');
    await expect.poll(async () => Number(await end.getAttribute('aria-valuenow'))).toBeCloseTo(before + 1, 3);
  });

  test('it is left out with a reason and taken in again', async () => {
    await bench.page.locator('.lanes').focus();
    await bench.press('l');
    const asked = bench.page.getByRole('dialog');
    await asked.waitFor();
    await expect.poll(() => bench.focused()).toBe('a field');
    await bench.page.keyboard.type('the door slammed');
    await bench.press('Enter');
    await asked.waitFor({ state: 'detached' });
    await expect.poll(async () => (await bench.segments(1))[0]).toContain('left out');
    await bench.page.locator('.lanes').focus();
    await bench.press('l');
    await expect.poll(async () => (await bench.segments(1))[0]).not.toContain('left out');
  });

  test('menus and dialogs are reached and left with the keyboard', async () => {
    await bench.press('F1');
    const list = bench.page.getByRole('dialog', { name: 'Keyboard shortcuts' });
    await list.waitFor();
    await bench.press('Escape');
    await list.waitFor({ state: 'detached' });
    await bench.page.getByRole('menuitem', { name: 'File', exact: true }).focus();
    await bench.press('ArrowRight', 'ArrowDown');
    await expect.poll(() => bench.focused()).toContain('Undo');
    await bench.press('Escape');
    await bench.page.locator('.lanes').focus();
    await bench.press('4');
    await bench.page.getByRole('tab', { name: 'Apparatus', selected: true }).waitFor();
  });

  test('the apparatus is typed in, mistakes are named, and the plan follows', async () => {
    await bench.page.getByLabel('How the coils are described').selectOption('dimensions');
    await bench.type('turns_per_coil', '124');
    await bench.type('radius_m', '-150');
    await expect.poll(() => bench.page.locator('.mistake').allInnerTexts()).toEqual(['Radius must be above 0 mm.']);
    await bench.type('radius_m', '150');
    await bench.type('spacing_m', '150,0');
    await bench.page.getByLabel('How the magnet is described').selectOption('cylinder');
    await bench.type('mass_kg', '18,7');
    await bench.type('length_m', '60');
    await bench.type('diameter_m', '8');
    await bench.page.locator('.plan summary').click();
    await bench.page.getByRole('table', { name: 'What to expect at each current' }).waitFor();
    const saved = await bench.downloads(() => bench.press('Control+s'), 1);
    const session = JSON.parse([...saved.values()][0]!.toString()) as Session;
    expect(session.apparatus).toEqual({
      coil: { turns_per_coil: 124, radius_m: 0.15, spacing_m: 0.15 },
      magnet: { shape: 'cylinder', mass_kg: 0.0187, length_m: 0.06, diameter_m: 0.008 },
    });
    expect(session.segments[0]).toMatchObject({ current_A: -0.05 });
  });

  test('a session whose recording isn’t there says so, and the recording is recognised when it is shown', async () => {
    const lone = join(folder, 'lone.needlebeat.json');
    await writeFile(lone, await readFile(SAMPLE.session));
    const chooser = bench.page.waitForEvent('filechooser');
    await bench.page.locator('.lanes').focus();
    await bench.press('Control+o');
    await (await chooser).setFiles(lone);
    const search = bench.page.getByRole('button', { name: /Find boathouse.mp4/ });
    await search.waitFor();
    await expect.poll(() => bench.page.locator('.no-picture').innerText()).toContain('boathouse.mp4');
    // Its segments can be seen all the same.
    await bench.segments(11);
    const find = bench.page.waitForEvent('filechooser');
    await search.click();
    await (await find).setFiles(SAMPLE.recording);
    await bench.page.locator('.picture-stage canvas[aria-label^="Frame"]').waitFor();
    await bench.segments(11);
  });

  test('at 200 % everything is still there, and nothing was complained about', async () => {
    await bench.page.setViewportSize({ width: 720, height: 450 });
    for (const name of ['Picture', 'Time board', 'Sheets']) {
      const part = bench.page.getByRole('region', { name });
      await expect.poll(async () => (await part.boundingBox())?.width, { message: name }).toBeGreaterThan(300);
      await expect.poll(async () => (await part.boundingBox())?.height, { message: name }).toBeGreaterThan(120);
    }
    await expect.poll(() => bench.page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(720);
    expect(bench.complaints).toEqual([]);
  });
});
