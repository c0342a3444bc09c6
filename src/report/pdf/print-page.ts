import { spawn } from 'node:child_process';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { InputError } from '../../recording/input-error.ts';

/** What printing needs from the outside. */
export interface PrintTools {
  /** A browser of the Chromium family. */
  readonly browser: string;
  /** After so long the browser is ended (default: 60 s). */
  readonly deadline_ms?: number;
  readonly signal?: AbortSignal | undefined;
}

const DEADLINE_MS = 60_000;
const KEPT_STDERR = 4000;

/** No profile of the user's, no window, nothing from the network: the page needs none of them. */
const ARGUMENTS = [
  '--headless',
  '--disable-gpu',
  '--no-first-run',
  '--no-default-browser-check',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-default-apps',
  '--disable-extensions',
  '--disable-sync',
  '--disable-quic',
  '--host-resolver-rules=MAP * ~NOTFOUND',
  '--no-pdf-header-footer',
  '--print-to-pdf-no-header',
  '--hide-scrollbars',
];

/**
 * Prints a self-contained HTML page as PDF by a browser with a profile of its own that is thrown away.
 * @returns the whole PDF.
 * @throws InputError with one sentence where the browser fails or doesn't end in time; the signal's reason when aborted.
 */
export async function printPage(page: string, tools: PrintTools): Promise<Uint8Array> {
  const folder = await mkdtemp(join(tmpdir(), 'needlebeat-pdf-'));
  try {
    const [html, pdf] = [join(folder, 'report.html'), join(folder, 'report.pdf')];
    await writeFile(html, page, 'utf8');
    const said = await runBrowser(tools, [
      ...ARGUMENTS,
      // A browser's sandbox refuses to work for the superuser; the page holds no scripts.
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
      `--user-data-dir=${join(folder, 'profile')}`,
      `--print-to-pdf=${pdf}`,
      pathToFileURL(html).href,
    ]);
    const bytes = await readFile(pdf).catch(() => null);
    if (bytes === null || !isWhole(bytes)) throw new InputError(`report.pdf: ${tools.browser} made no PDF${said}.`);
    return bytes;
  } finally {
    // The browser's helpers may still be closing their files.
    await rm(folder, { recursive: true, force: true, maxRetries: 10, retryDelay: 100 }).catch(() => undefined);
  }
}

/** Runs the browser to its end and returns what it complained of, ready to be put behind a sentence. */
function runBrowser(
  { browser, deadline_ms = DEADLINE_MS, signal }: PrintTools,
  args: readonly string[],
): Promise<string> {
  signal?.throwIfAborted();
  return new Promise((done, fail) => {
    // A group of its own, so that the browser's helpers end with it.
    const own = process.platform !== 'win32';
    const child = spawn(browser, args, { stdio: ['ignore', 'ignore', 'pipe'], detached: own, windowsHide: true });
    let said = '';
    let late = false;
    const end = () => {
      try {
        if (own && child.pid !== undefined) process.kill(-child.pid, 'SIGKILL');
        else child.kill('SIGKILL');
      } catch {
        // It has ended by itself.
      }
    };
    const timer = setTimeout(() => {
      late = true;
      end();
    }, deadline_ms);
    signal?.addEventListener('abort', end, { once: true });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      said = (said + text).slice(-KEPT_STDERR);
    });
    const settle = (outcome: () => void) => {
      clearTimeout(timer);
      signal?.removeEventListener('abort', end);
      outcome();
    };
    child.on('error', (error: NodeJS.ErrnoException) =>
      settle(() => fail(new InputError(`report.pdf: ${browser} can't be started (${error.code ?? error.message}).`))),
    );
    child.on('close', () =>
      settle(() => {
        if (signal?.aborted) fail(signal.reason);
        else if (late) fail(new InputError(`report.pdf: ${browser} did not finish within ${deadline_ms / 1000} s.`));
        else done(lastLine(said));
      }),
    );
  });
}

function lastLine(text: string): string {
  const line = text.trim().split('\n').at(-1)?.replace(/\s+/g, ' ').replace(/\.$/, '').slice(0, 200) ?? '';
  return line === '' ? '' : `: ${line}`;
}

/** The exit code proves nothing: the file must begin and end as a PDF does (ISO 32000-1, 7.5.2 and 7.5.5). */
function isWhole(bytes: Uint8Array): boolean {
  const text = (from: number, to: number) => Buffer.from(bytes.subarray(from, to)).toString('latin1');
  return text(0, 5) === '%PDF-' && text(Math.max(0, bytes.length - 1024), bytes.length).includes('%%EOF');
}
