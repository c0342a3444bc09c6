import { chmod, mkdir, mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { findBrowser } from '../../../src/report/pdf/find-browser.ts';
import { printPage } from '../../../src/report/pdf/print-page.ts';
import { reportPage } from '../../../src/report/report-page.ts';
import { exampleResults } from '../support/results-fixture.ts';

const browser = await findBrowser(process.env, process.platform);
if (browser === null) {
  console.warn('Printing left out: no Chromium found (set CHROMIUM_PATH, or install Debian’s chromium).');
}

let dir: string;
beforeEach(async () => {
  dir = await mkdtemp(join(tmpdir(), 'needlebeat-print-test-'));
});
afterEach(() => rm(dir, { recursive: true, force: true }));

/** A program of that name and content. */
async function program(name: string, content: string): Promise<string> {
  const path = join(dir, name);
  await writeFile(path, content);
  await chmod(path, 0o755);
  return path;
}

describe.skipIf(browser === null)('printing the report', () => {
  it('gives a whole PDF of several A4 or Letter pages, and leaves nothing behind', async () => {
    const before = await readdir(tmpdir());
    const pdf = Buffer.from(await printPage(reportPage(exampleResults()), { browser: browser ?? '' }));
    const text = pdf.toString('latin1');
    expect(text).toMatch(/^%PDF-1\.\d/);
    const [, pages] = text.match(/\/Type\s*\/Pages[^>]*\/Count (\d+)/) ?? text.match(/\/Count (\d+)/) ?? [];
    expect(Number(pages)).toBeGreaterThan(2);
    const left = (await readdir(tmpdir())).filter(
      (name) => name.startsWith('needlebeat-pdf-') && !before.includes(name),
    );
    expect(left).toEqual([]);
  });
});

describe.skipIf(process.platform === 'win32')('a browser that fails', () => {
  it('is one sentence: with its last words, when it is late, when it can’t be started, when it makes half a file', async () => {
    const silent = await program('silent', '#!/bin/sh\necho "cannot open display." >&2\n');
    await expect(printPage('', { browser: silent })).rejects.toThrow(
      /^report\.pdf: .*silent made no PDF: cannot open display\.$/,
    );
    const late = await program('late', '#!/bin/sh\nsleep 30\n');
    await expect(printPage('', { browser: late, deadline_ms: 200 })).rejects.toThrow(/did not finish within 0\.2 s\.$/);
    const missing = join(dir, 'missing');
    await expect(printPage('', { browser: missing })).rejects.toThrow(/missing can't be started \(ENOENT\)\.$/);
    const half = await program(
      'half',
      '#!/bin/sh\nfor a in "$@"; do case "$a" in --print-to-pdf=*) printf "%%PDF-1.4" > "$(echo "$a" | cut -d= -f2)";; esac; done\n',
    );
    await expect(printPage('', { browser: half })).rejects.toThrow(/half made no PDF\.$/);
  });

  it('is ended when the job is interrupted', async () => {
    const late = await program('late', '#!/bin/sh\nsleep 30\n');
    const interruption = new AbortController();
    const printing = printPage('', { browser: late, signal: interruption.signal });
    setTimeout(() => interruption.abort(new Error('interrupted')), 100);
    await expect(printing).rejects.toThrow('interrupted');
  });
});

describe.skipIf(process.platform === 'win32')('finding a browser', () => {
  it('takes CHROMIUM_PATH before PATH, and only what can be run', async () => {
    const named = await program('my-browser', '');
    const folder = join(dir, 'bin');
    await mkdir(folder);
    await writeFile(join(folder, 'chromium'), '');
    expect(await findBrowser({ PATH: folder }, 'linux')).toBeNull();
    await chmod(join(folder, 'chromium'), 0o755);
    expect(await findBrowser({ PATH: folder }, 'linux')).toBe(join(folder, 'chromium'));
    expect(await findBrowser({ PATH: folder, CHROMIUM_PATH: named }, 'linux')).toBe(named);
    expect(await findBrowser({ PATH: folder, CHROMIUM_PATH: join(dir, 'gone') }, 'linux')).toBeNull();
    expect(await findBrowser({}, 'linux')).toBeNull();
  });
});
