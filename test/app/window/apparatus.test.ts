import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Session } from '../../../app/contract.ts';
import { BenchDriver } from './bench-driver.ts';
import { hasChromium, startChromium } from './chromium.ts';
import { SAMPLE, type ServedWindow, serveWindow } from './served-window.ts';

describe.skipIf(!hasChromium())('fibre and current meter in the apparatus sheet', { timeout: 300_000 }, () => {
  let browser: Browser;
  let served: ServedWindow;
  let bench: BenchDriver;

  beforeAll(async () => {
    browser = await startChromium();
    served = await serveWindow(SAMPLE.recording);
    bench = await BenchDriver.enter(browser, served.address);
    await bench.framed();
    await bench.press('r', 'Enter');
    await bench.page.locator('.lanes').focus();
    await bench.press('b', ...Array<string>(4).fill('Shift+ArrowRight'), 'e');
    await bench.seeSheet('Apparatus');
  });

  afterAll(async () => {
    await bench?.leave();
    await browser?.close();
    await served?.close();
  });

  const saved = async () => {
    const files = await bench.downloads(() => bench.press('Control+s'), 1);
    return JSON.parse([...files.values()][0]!.toString()) as Session;
  };
  const choose = (label: string, value: string) => bench.page.getByLabel(label, { exact: true }).selectOption(value);
  const lacking = () => bench.page.locator('.fibre .state-line').allInnerTexts();

  test('a run without field is typed with a decimal comma, its other body described, and undone', async () => {
    await bench.segments(1);
    await bench.type('u_gain', '0,4');
    await bench.type('resolution_A', '1');
    await choose('Frequency of the run without field', 'typed');
    await expect.poll(lacking).toEqual(['Still needed: the frequency without field.']);
    await bench.type('run without field f0_Hz', '-0,1');
    await expect
      .poll(() => bench.page.locator('.mistake').allInnerTexts())
      .toEqual(['Frequency, run without field must be above 0 Hz.']);
    await bench.type('run without field f0_Hz', '0,0967');
    await bench.type('u_run without field f0_Hz', '0,0005');
    await choose('What the fibre turned back in the run without field', 'inertia');
    await expect.poll(lacking).toEqual(['Still needed: the other body’s mass and dimensions.']);
    await bench.type('body inertia_kg_m2', '56,8');
    await expect.poll(lacking).toEqual([]);
    const { apparatus } = await saved();
    expect(apparatus).toEqual({
      meter: { u_gain: 0.004, resolution_A: 0.001 },
      fibre: { run_without_field: { f0_Hz: 0.0967, u_f0_Hz: 0.0005, body: { inertia_kg_m2: 5.68e-6 } } },
    });
    await bench.page.locator('.lanes').focus();
    await bench.press('Control+z');
    await expect.poll(lacking).toEqual([]);
    await expect.poll(() => bench.page.locator('.fibre [data-entry="body inertia_kg_m2"]').count()).toBe(0);
  });

  test('runs on several lengths are typed or taken from a segment, which takes its run along when it is deleted', async () => {
    await choose('Frequency of the run without field', 'none');
    for (const _run of [0, 1]) await bench.page.getByRole('button', { name: 'Add a length' }).click();
    await bench.type('fibre length', '420');
    await bench.type('length 0', '100');
    await bench.type('run 1 f0_Hz', '0,4312');
    await bench.type('length 1', '200');
    await choose('Frequency of run 2', 'segment');
    await choose('Segment of run 2', 's01');
    await expect.poll(lacking).toEqual([]);
    const { apparatus } = await saved();
    expect(apparatus?.fibre).toEqual({
      length_m: 0.42,
      runs_at_lengths: [
        { length_m: 0.1, f0_Hz: 0.4312 },
        { length_m: 0.2, segment: 's01' },
      ],
    });
    await bench.page.locator('.lanes').focus();
    await bench.press('Delete');
    await bench.segments(0);
    await expect.poll(lacking).toEqual(['Still needed: a second length.']);
    expect((await saved()).apparatus?.fibre?.runs_at_lengths).toEqual([{ length_m: 0.1, f0_Hz: 0.4312 }]);
    expect(bench.complaints).toEqual([]);
  });
});
