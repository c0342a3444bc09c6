import { spawn } from 'node:child_process';
import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { type Host, startHost } from '../host/host.ts';
import { userFolderPath } from '../host/user-folder.ts';
import { packageRoot } from '../page/package-root.ts';
import { readPageFiles } from '../page/page-files.ts';
import { openBrowser } from './browser.ts';
import { electronRuntime, hasDisplay } from './electron-runtime.ts';
import { type LoopbackServer, serveLoopback } from './server.ts';

/** The session that the empty window offers, below the package's folder. */
export const DEMO = 'samples/boathouse/boathouse.needlebeat.json';

/** An Electron that ends with an error so soon never had a window. */
const FAILED_START_MS = 10_000;

/**
 * Opens the window and stays until it is closed: Electron where its runtime is there, else the browser. Says on stdout which it did and why.
 * @param file absolute path of a session or recording to open.
 * @param signal ends it.
 * @throws InputError where the file can't be used.
 */
export async function openWindow(file?: string, signal?: AbortSignal): Promise<void> {
  const uid = process.getuid?.() ?? null;
  const choice = electronRuntime({ env: process.env, platform: process.platform, uid });
  let reason = choice.use ? '' : choice.reason;
  if (choice.use) {
    say('Needlebeat opens its own window (Electron).');
    const began_ms = performance.now();
    const code = await runElectron(choice.executable, choice.root, file, signal);
    if (code === 0 || signal?.aborted || performance.now() - began_ms > FAILED_START_MS) return;
    reason = `Electron ended with status ${code}`;
  }
  await openInBrowser(reason, file, signal);
}

async function openInBrowser(reason: string, file: string | undefined, signal?: AbortSignal): Promise<void> {
  await using window = await serveWindowOnLoopback(file ?? null);
  const address = window.server.newAddress();
  const shows = process.env.NEEDLEBEAT_WINDOW !== 'address' && hasDisplay(process);
  const opened = shows && (await openBrowser(address, process.platform));
  say(
    opened
      ? `Needlebeat is shown in the browser: ${reason}.`
      : `Needlebeat waits for a browser: ${reason}. Open this address on this machine:`,
  );
  say(`  ${address}`);
  say('The address lets one browser in, once. Ctrl+C ends Needlebeat; unsaved work is kept for the next start.');
  const lines = process.stdin.isTTY ? createInterface(process.stdin) : null;
  if (lines) say('Press Enter for another address.');
  lines?.on('line', () => say(`  ${window.server.newAddress()}`));
  await ended(signal);
  lines?.close();
}

/** The host and its server on 127.0.0.1. */
export interface LoopbackWindow {
  readonly host: Host;
  readonly server: LoopbackServer;
  close(): Promise<void>;
  [Symbol.asyncDispose](): Promise<void>;
}

/**
 * Starts the host and serves the built window.
 * @param file to open, absolute; null: what the last run left behind, or nothing.
 * @throws InputError where the file can't be used.
 */
export async function serveWindowOnLoopback(file: string | null): Promise<LoopbackWindow> {
  const root = packageRoot() ?? process.cwd();
  const page = await readPageFiles(join(root, 'dist/window'));
  const host = await startHost(
    {
      userFolder: userFolderPath(process.env, process.platform),
      env: process.env,
      cores: Math.max(1, availableParallelism()),
      shell: null,
      browser: true,
      demo: join(root, DEMO),
      runtime: [{ name: 'Node.js', version: process.versions.node }],
      report: (error) => void process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`),
    },
    file,
  );
  const server = await serveLoopback({
    page,
    connect: (transport) => host.connect(transport),
    uploads: { folder: host.folder.uploads, arrived: (path, name) => host.addToken(path, 'read', name) },
    takeDownload: (address) => host.downloads?.take(address) ?? null,
  }).catch(async (error: unknown) => {
    await host.close();
    throw error;
  });
  const close = async () => {
    await server.close();
    await host.close();
  };
  return { host, server, close, [Symbol.asyncDispose]: close };
}

function runElectron(
  executable: string,
  root: string,
  file: string | undefined,
  signal: AbortSignal | undefined,
): Promise<number> {
  const { ELECTRON_RUN_AS_NODE: _, ...env } = process.env;
  const child = spawn(executable, [root, ...(file === undefined ? [] : [file])], { stdio: 'inherit', env });
  const end = () => child.kill('SIGTERM');
  signal?.addEventListener('abort', end, { once: true });
  return new Promise((resolve) => {
    child.once('error', () => resolve(-1));
    child.once('exit', (code) => {
      signal?.removeEventListener('abort', end);
      resolve(code ?? -1);
    });
  });
}

function ended(signal: AbortSignal | undefined): Promise<void> {
  return new Promise((resolve) => {
    if (!signal) return;
    if (signal.aborted) resolve();
    signal.addEventListener('abort', () => resolve(), { once: true });
  });
}

function say(line: string): void {
  process.stdout.write(`${line}\n`);
}
