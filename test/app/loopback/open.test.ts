import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { connectHost, type HostClient } from '../../../app/contract/client.ts';
import { electronRuntime, hasDisplay } from '../../../app/loopback/electron-runtime.ts';
import { socketTransport } from '../../../app/loopback/socket-transport.ts';

const root = new URL('../../../', import.meta.url).pathname;
const cli = join(root, 'dist/src/cli.js');
const ready = existsSync(cli) && existsSync(join(root, 'dist/window/index.html'));
if (!ready) console.log('"needlebeat open" is not tested here: run "npm run build" first.');

let home: string;
const started: ChildProcess[] = [];
beforeEach(async () => {
  home = await mkdtemp(join(tmpdir(), 'needlebeat-open-'));
});
afterEach(async () => {
  for (const child of started.splice(0)) child.kill('SIGKILL');
  await rm(home, { recursive: true, force: true });
});

/** Runs `needlebeat open` as on a machine without a display. */
function open(...args: string[]) {
  const { DISPLAY: _d, WAYLAND_DISPLAY: _w, ...env } = process.env;
  const child = spawn(process.execPath, [cli, 'open', ...args], {
    env: { ...env, NEEDLEBEAT_HOME: join(home, 'user') },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  started.push(child);
  let [out, err] = ['', ''];
  child.stdout.on('data', (chunk) => {
    out += String(chunk);
  });
  child.stderr.on('data', (chunk) => {
    err += String(chunk);
  });
  const ended = new Promise<number | null>((resolve) => child.once('close', resolve));
  return { child, ended, out: () => out, err: () => err };
}

async function address(run: ReturnType<typeof open>): Promise<URL> {
  await expect.poll(run.out, { timeout: 60_000 }).toMatch(/http:\/\/127\.0\.0\.1:\d+\/enter\?secret=[\w-]+\s/);
  return new URL(/http:\S+/.exec(run.out())?.[0] ?? '');
}

/** Goes the way of a browser: through the address, to the page, onto the socket. */
async function enter(url: URL): Promise<HostClient> {
  const reply = await fetch(url, { redirect: 'manual' });
  const Cookie = reply.headers.get('set-cookie')?.split(';')[0] ?? '';
  expect(reply.status).toBe(303);
  const page = await fetch(url.origin, { headers: { Cookie } });
  expect(await page.text()).toContain('<script');
  const socket = new WebSocket(`${url.origin.replace('http', 'ws')}/link`, { headers: { Cookie, Origin: url.origin } });
  await new Promise((resolve, reject) => {
    socket.once('open', resolve);
    socket.once('error', reject);
  });
  return connectHost(socketTransport(socket));
}

describe.skipIf(!ready)('needlebeat open, without a display', () => {
  it('says what it does and why, keeps serving, and ends when interrupted', async () => {
    const run = open();
    const url = await address(run);
    expect(run.out()).toMatch(/waits for a browser: .+\. Open this address/);
    const client = await enter(url);
    expect(await client.call('hello', { contract: 1 })).toMatchObject({ dialogs: false, uploads: true });
    expect((await client.call('about', {})).ffmpeg?.version).toBeTruthy();
    run.child.kill('SIGINT');
    await run.ended;
    expect(run.err()).toBe('');
    await expect(fetch(url)).rejects.toThrow();
  });

  it('has the last edit back after kill -9', async () => {
    const first = open();
    const client = await enter(await address(first));
    await client.call('openDemo', {});
    const before = await client.call('getDocument', {});
    if (!before.session) throw new Error('the demo did not open');
    const session = { ...before.session, title: 'Changed just now' };
    const { revision } = await client.call('edit', { session, base: before.revision, label: 'Title' });
    expect(revision).toBeGreaterThan(before.revision);
    first.child.kill('SIGKILL');
    await first.ended;

    const second = open();
    const again = await enter(await address(second));
    const document = await again.call('getDocument', {});
    expect(document).toMatchObject({ restored: true, dirty: true, session: { title: 'Changed just now' } });
    // Ctrl+C keeps unsaved work too.
    second.child.kill('SIGINT');
    await second.ended;
    const third = await enter(await address(open()));
    expect((await third.call('getDocument', {})).session?.title).toBe('Changed just now');
  });

  it('refuses a file that can’t be used with one sentence and status 2', async () => {
    const path = join(home, 'notes.mp4');
    await writeFile(path, 'no film');
    const run = open(path);
    expect(await run.ended).toBe(2);
    expect(run.err()).toMatch(/^needlebeat: .*notes\.mp4.* is not a video recording.*\n$/);
    expect(run.out()).toBe('');
  });
});

describe('the choice between Electron and the browser', () => {
  const linux = { platform: 'linux' as const, uid: 1000 };
  it('follows NEEDLEBEAT_WINDOW and says so', () => {
    const choice = electronRuntime({ ...linux, env: { NEEDLEBEAT_WINDOW: 'browser', DISPLAY: ':0' } });
    expect(choice).toEqual({ use: false, reason: 'NEEDLEBEAT_WINDOW asks for the browser' });
  });

  it('takes Electron only where its runtime is there', async () => {
    const choice = (env: NodeJS.ProcessEnv, uid = 1000) => electronRuntime({ platform: 'linux', uid, env });
    const nowhere = choice({ DISPLAY: ':0', ELECTRON_OVERRIDE_DIST_PATH: join(home, 'none') });
    expect(nowhere).toMatchObject({ use: false, reason: expect.stringContaining('not been fetched') });
    await writeFile(join(home, 'electron'), '', { mode: 0o755 });
    const there = { ELECTRON_OVERRIDE_DIST_PATH: home };
    if (!existsSync(join(root, 'dist/app/main/main.js'))) return;
    expect(choice(there)).toMatchObject({ use: false, reason: 'this machine has no display' });
    expect(choice({ ...there, DISPLAY: ':0' }, 0)).toMatchObject({
      use: false,
      reason: expect.stringContaining('superuser'),
    });
    expect(choice({ ...there, WAYLAND_DISPLAY: 'wayland-0' })).toEqual({
      use: true,
      executable: join(home, 'electron'),
      root: root.replace(/\/$/, ''),
    });
  });

  it('knows where a display is', () => {
    expect(hasDisplay({ platform: 'linux', env: {} })).toBe(false);
    expect(hasDisplay({ platform: 'linux', env: { DISPLAY: '' } })).toBe(false);
    expect(hasDisplay({ platform: 'linux', env: { DISPLAY: ':1' } })).toBe(true);
    expect(hasDisplay({ platform: 'win32', env: {} })).toBe(true);
  });
});
