import { copyFile, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Results, SegmentResult, Session } from '../../../app/contract.ts';
import { BenchDriver } from './bench-driver.ts';
import { hasChromium, startChromium } from './chromium.ts';
import { runProgram, SAMPLE, type ServedWindow, serveWindow } from './served-window.ts';

/** True values of the sample's steps, as the script that drew it wrote them. */
interface Truth {
  readonly width: number;
  readonly height: number;
  readonly frames: number;
  readonly segments: readonly { readonly id: string; readonly f0_Hz: number }[];
}

describe.skipIf(!hasChromium())('the job in the window, on the sample', { timeout: 300_000 }, () => {
  let browser: Browser;
  let served: ServedWindow;
  let bench: BenchDriver;
  let truth: Truth;
  let sample: Session;
  let folder: string;
  let exported: { csv: string; results: Results };

  beforeAll(async () => {
    truth = JSON.parse(await readFile(SAMPLE.truth, 'utf8'));
    sample = JSON.parse(await readFile(SAMPLE.session, 'utf8'));
    folder = await mkdtemp(join(tmpdir(), 'needlebeat-job-'));
    browser = await startChromium();
    served = await serveWindow();
    bench = await BenchDriver.enter(browser, served.address);
  });

  afterAll(async () => {
    await bench?.leave();
    await browser?.close();
    await served?.close();
    await rm(folder, { recursive: true, force: true });
  });

  test('a file that is no video is refused with a sentence that names it', async () => {
    const bad = join(folder, 'notes.mp4');
    await writeFile(bad, 'not a video at all');
    await bench.openFile(bad);
    expect((await bench.mistakes()).join(' ')).toContain('notes.mp4');
    await bench.page.getByRole('button', { name: 'Put away' }).first().click();
  });

  test('a recording opens with its facts and its first picture', async () => {
    await bench.openFile(SAMPLE.recording);
    await bench.page.locator('.facts-list').waitFor();
    await expect.poll(() => bench.fact('Picture')).toBe(`${truth.width} × ${truth.height} px`);
    await expect.poll(() => bench.fact('Length')).toContain('frames');
    await expect.poll(() => bench.fact('Rate')).toContain('it varies');
  });

  test('the region is drawn and the bar in it is found at once', async () => {
    await bench.drawRegion(sample.views[0]!.region, truth);
    expect(await bench.barFound()).toMatch(/^Bar found at −?\d+\.\d°/);
  });

  test('the bar is followed over a stretch, with progress', async () => {
    await bench.showStretch(sample.segments[2]!.end_s + 6);
    const words = await bench.followStretch();
    expect(words.join('\n')).toMatch(/× real time \(\d+ frames\/s\)/);
    await bench.page.getByRole('img', { name: 'Angle of the bar against time', exact: true }).waitFor();
  });

  test('three segments are marked by dragging and their currents typed', async () => {
    for (const [i, s] of sample.segments.slice(0, 3).entries()) {
      await bench.markSegment(s.start_s + 0.2, s.end_s - 0.2);
      await bench.segments(i + 1);
      await bench.atSegment(s.id);
      await bench.type('u-current', '0.0003');
      await bench.page.getByRole('button', { name: /rising/ }).click();
    }
    await bench.selectSegment('s01');
    await bench.atSegment('s01');
    await bench.type('current', '0');
    // Enter goes on to the next segment's current.
    await bench.atSegment('s02');
    await bench.type('current', '0,05');
    await bench.atSegment('s03');
    await bench.type('current', '0.110 A');
    await expect
      .poll(async () => (await bench.segments(3)).map((name) => name.split(', ')[2]))
      .toEqual(['0 A', '0.05 A', '0.11 A']);
  });

  test('what can’t be a current is refused beside its field', async () => {
    await bench.type('current', 'much');
    await expect
      .poll(() => bench.page.locator('.mistake').innerText())
      .toBe('Current must be a number in A, such as 0.25 or 0,25.');
    await bench.press('Escape');
    await expect.poll(() => bench.entry('current')).toBe('0.11');
  });

  test('the fit of the selected segment and its numbers come, and they are right', async () => {
    await bench.measured(3);
    for (const id of ['s01', 's02', 's03']) {
      await bench.selectSegment(id);
      await bench.atSegment(id);
      const f0 = await bench.number('undamped');
      const expected = truth.segments.find((s) => s.id === id)!.f0_Hz;
      expect(f0.unit).toBe('Hz');
      expect(f0.u).toBeGreaterThan(0);
      // How well it is right is tested with the core; here that the right number stands in the right place.
      expect(Math.abs(f0.value / expected - 1), `${id}: ${f0.value} against ${expected}`).toBeLessThan(1e-3);
      expect(f0.u).toBeLessThan(1e-3 * expected);
    }
    await bench.page.getByRole('img', { name: /angle of the bar against time with the fit/ }).waitFor();
  });

  test('the quick fit follows an edge that is dragged, and undo brings the edge back', async () => {
    const stretch = async () => (await bench.segments(3))[2]?.split(', ')[1];
    const before = await stretch();
    const quick = bench.page.locator('.state-line', { hasText: 'Quick fit' }).waitFor();
    await bench.dragEdge(sample.segments[2]!.end_s - 0.2, sample.segments[2]!.end_s - 3);
    await expect.poll(stretch).not.toBe(before);
    await quick;
    await bench.press('Control+z');
    await expect.poll(stretch).toBe(before);
    await bench.press('Control+Shift+z');
    await expect.poll(stretch).not.toBe(before);
    await bench.press('Control+z');
    await expect.poll(stretch).toBe(before);
    await bench.measured(3);
  });

  test('the field sheet shows every segment; a click on a point selects its segment', async () => {
    await bench.seeSheet('Field');
    await expect.poll(async () => (await bench.row('s02')).join(' ')).toContain('0.05');
    await bench.page.locator('[data-point="s02"]').click();
    await bench.page.locator('tr[data-row="s02"][aria-selected="true"]').waitFor();
  });

  test('a reload in the middle loses nothing', async () => {
    const before = await bench.segments(3);
    await bench.seeSheet('Field');
    await layoutKept('"sheet": "field"');
    await bench.page.reload();
    await bench.measured(3);
    await expect.poll(() => bench.segments(3)).toEqual(before);
    await bench.page.getByRole('tab', { name: 'Field', selected: true }).waitFor();
    await bench.page.getByRole('img', { name: 'Angle of the bar against time', exact: true }).waitFor();
  });

  test('the program killed and started again brings the session back', async () => {
    const before = await bench.segments(3);
    const edge = () => bench.page.getByRole('separator', { name: 'Height of the time board' });
    await edge().focus();
    await bench.press('ArrowUp', 'ArrowUp', 'ArrowUp');
    await expect.poll(() => edge().getAttribute('aria-valuenow')).toBe('36');
    await layoutKept('"board": 0.36');
    await bench.leave();
    await served.kill();
    served = await serveWindow(undefined, served.home);
    bench = await BenchDriver.enter(browser, served.address);
    const withoutState = (names: string[]) => names.map((name) => name.replace(/, [a-z ]+$/, ''));
    expect(withoutState(await bench.segments(3))).toEqual(withoutState(before));
    await expect.poll(() => edge().getAttribute('aria-valuenow')).toBe('36');
    await bench.page.getByRole('tab', { name: 'Field', selected: true }).waitFor();
  });

  const layoutKept = (what: string) =>
    expect.poll(() => readFile(join(served.home, 'layout.json'), 'utf8').catch(() => '')).toContain(what);

  test('what is exported is what the command line measures from the exported session', async () => {
    await bench.measured(3);
    const files = await bench.downloads(() => bench.choose('File', 'Export everything…'), 4);
    const names = [...files.keys()];
    const sessionName = names.find((name) => name.endsWith('.needlebeat.json'))!;
    expect(names).toEqual(expect.arrayContaining(['results.csv', 'results.json', 'report.html']));
    const session = JSON.parse(files.get(sessionName)!.toString()) as Session;
    expect(session.segments.map((s) => s.current_A)).toEqual([0, 0.05, 0.11]);
    await writeFile(join(folder, sessionName), files.get(sessionName)!);
    await copyFile(SAMPLE.recording, join(folder, session.recordings[0]!.file));
    const run = await runProgram('measure', join(folder, sessionName), '--out', join(folder, 'out'), '--quiet');
    expect(run.status, run.stderr).toBe(0);
    expect(files.get('results.csv')!.toString()).toBe(await readFile(join(folder, 'out/results.csv'), 'utf8'));
    expect(files.get('results.json')!.toString()).toBe(await readFile(join(folder, 'out/results.json'), 'utf8'));
    const results = JSON.parse(files.get('results.json')!.toString()) as Results;
    expect(results.segments.map((s) => s.id)).toEqual(['s01', 's02', 's03']);
    exported = { csv: files.get('results.csv')!.toString(), results };
  });

  test('the plot is exported as SVG and as PNG', async () => {
    const svg = await bench.downloads(() => bench.choose('File', 'Export plot (SVG)…'), 1);
    expect([...svg.values()][0]!.toString()).toMatch(/^<svg [\s\S]*<\/svg>\s*$/);
    const png = await bench.downloads(() => bench.choose('File', 'Export plot (PNG)…'), 1);
    expect([...png.values()][0]!.subarray(1, 4).toString()).toBe('PNG');
  });

  test('the report opens in a tab of its own and the browser’s print dialog over it', async () => {
    const report = await bench.printed(() => bench.choose('File', 'Print the report or save it as PDF…'));
    expect(report.title).toContain('Needlebeat report');
    expect(report.text).toContain('s02');
    expect(report.prints).toBe(1);
  });

  test('the table that is copied holds the results of the same session, cell by cell', async () => {
    await bench.choose('Edit', 'Copy table');
    await bench.page.locator('.notice', { hasText: 'clipboard: 3 rows' }).waitFor();
    const [head = [], ...rows] = (await bench.pasted()).split('\n').map((line) => line.split('\t'));
    expect(head).toEqual(exported.csv.split(/\r?\n/)[0]?.split(','));
    expect(rows).toHaveLength(exported.results.segments.length);
    for (const [i, segment] of exported.results.segments.entries()) {
      const cells = new Map(head.map((name, column) => [name, rows[i]?.[column]]));
      expect(cells.size).toBe(rows[i]?.length);
      for (const name of head as (keyof SegmentResult)[]) {
        const value = segment[name];
        const cell = cells.get(name);
        if (typeof value === 'number') expect(Number(cell), `${segment.id} ${name}`).toBe(value);
        else if (Array.isArray(value)) expect(cell).toBe(value.map((check) => check.code).join(';'));
        else expect(cell, `${segment.id} ${name}`).toBe(value ?? '');
      }
    }
  });

  test('nothing was complained about in the browser’s console, and every control has a name', async () => {
    for (const sheet of ['View', 'Segment', 'Field', 'Apparatus'] as const) {
      await bench.seeSheet(sheet);
      expect(await bench.nameless()).toEqual([]);
    }
    expect(bench.complaints).toEqual([]);
  });
});
