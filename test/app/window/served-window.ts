import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';

const ROOT = resolve(import.meta.dirname, '../../..');
const CLI = join(ROOT, 'dist/src/cli.js');

/** Files of the sample that the window tests work on. */
export const SAMPLE = {
  session: join(ROOT, 'samples/boathouse/boathouse.needlebeat.json'),
  recording: join(ROOT, 'samples/boathouse/boathouse.mp4'),
  truth: join(ROOT, 'samples/boathouse/boathouse.truth.json'),
} as const;

/** `needlebeat open` as a user would start it, serving a browser, with a user folder of its own. */
export interface ServedWindow {
  /** Lets one browser in, once. */
  readonly address: string;
  readonly home: string;
  /** Ends it as a power cut would. */
  kill(): Promise<void>;
  close(): Promise<void>;
}

/** Starts the built program. @param home the user folder of a run before; left out: a new, empty one. */
export async function serveWindow(file?: string, home?: string): Promise<ServedWindow> {
  if (!existsSync(CLI)) throw new Error('The program has not been built: run "npm run build" first.');
  const folder = home ?? (await mkdtemp(join(tmpdir(), 'needlebeat-window-')));
  const child = spawn(process.execPath, [CLI, 'open', ...(file === undefined ? [] : [file])], {
    env: { ...process.env, NEEDLEBEAT_HOME: folder, NEEDLEBEAT_WINDOW: 'address' },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const address = await printedAddress(child);
  const ended = new Promise<void>((done) => child.once('exit', () => done()));
  return {
    address,
    home: folder,
    async kill() {
      child.kill('SIGKILL');
      await ended;
    },
    async close() {
      if (child.exitCode === null && child.signalCode === null) child.kill('SIGTERM');
      await ended;
      await rm(folder, { recursive: true, force: true });
    },
  };
}

/** Runs the program to its end; the exit status and what it printed. */
export function runProgram(...args: string[]): Promise<{ status: number | null; stdout: string; stderr: string }> {
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, [CLI, ...args], { stdio: ['ignore', 'pipe', 'pipe'] });
    let stdout = '';
    let stderr = '';
    child.stdout.on('data', (data) => (stdout += data));
    child.stderr.on('data', (data) => (stderr += data));
    child.once('error', fail);
    child.once('close', (status) => done({ status, stdout, stderr }));
  });
}

function printedAddress(child: ChildProcess): Promise<string> {
  return new Promise((found, fail) => {
    let text = '';
    const read = (data: Buffer) => {
      text += data;
      const address = /http:\/\/127\.0\.0\.1:\d+\/\S+/.exec(text)?.[0];
      if (address) found(address);
    };
    child.stdout?.on('data', read);
    child.stderr?.on('data', (data) => (text += data));
    child.once('exit', (code) => fail(new Error(`needlebeat open ended with ${code}: ${text}`)));
  });
}
