import { EventEmitter } from 'node:events';
import { existsSync } from 'node:fs';
import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { MessageChannel, type MessagePort } from 'node:worker_threads';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { connectHost } from '../../../app/contract/client.ts';
import type { FromHost, ToHost } from '../../../app/main/host-messages.ts';
import { serveShell } from '../../../app/main/host-process.ts';
import type { Port } from '../../../app/main/port-transport.ts';
import { portTransport } from '../../../app/main/port-transport.ts';

const root = new URL('../../../', import.meta.url).pathname;
const demo = join(root, 'samples/boathouse/boathouse.needlebeat.json');
if (!existsSync(demo)) console.log('The host process is not tested here: the sample is missing.');

/** Node's port with the events of Electron's. */
function asElectronPort(port: MessagePort): Port {
  const made = Object.assign(new EventEmitter(), {
    postMessage: (message: unknown) => port.postMessage(message),
    // Node's port begins to deliver with its first listener, Electron's when it is started.
    start: () => void port.on('message', (data) => made.emit('message', { data })),
    close: () => port.close(),
  });
  port.on('close', () => made.emit('close'));
  return made as unknown as Port;
}

describe.skipIf(!existsSync(demo))('the host process', () => {
  let home: string;
  let told: FromHost[];
  let exit: ReturnType<typeof vi.fn<(code: number) => void>>;
  let toHost: (message: ToHost, ports?: Port[]) => void;

  beforeEach(async () => {
    home = await mkdtemp(join(tmpdir(), 'needlebeat-process-'));
    told = [];
    exit = vi.fn<(code: number) => void>();
    const inbox = new EventEmitter();
    serveShell(
      {
        postMessage: (message) => told.push(structuredClone(message)),
        on: (event, listener) => inbox.on(event, listener),
      },
      exit,
    );
    toHost = (data, ports = []) => inbox.emit('message', { data: structuredClone(data), ports });
  });
  afterEach(async () => {
    if (exit.mock.calls.length === 0) {
      toHost({ kind: 'close', number: 999, discard: true });
      await vi.waitFor(() => expect(exit).toHaveBeenCalled(), 20_000);
    }
    await rm(home, { recursive: true, force: true });
  });
  const heard = <K extends FromHost['kind']>(kind: K) =>
    vi.waitFor(() => {
      const found = told.findLast((m) => m.kind === kind);
      if (!found) throw new Error(`nothing of ${kind} yet`);
      return found as Extract<FromHost, { kind: K }>;
    }, 20_000);
  const start = (file: string | null = null) =>
    toHost({ kind: 'start', userFolder: home, cores: 1, demo, runtime: [], file });
  const openWindow = () => {
    const { port1, port2 } = new MessageChannel();
    toHost({ kind: 'window' }, [asElectronPort(port1)]);
    return connectHost(portTransport(asElectronPort(port2)));
  };

  it('answers a window that came before it had started, through the shell’s dialogs', async () => {
    const client = openWindow();
    start();
    expect(await client.call('hello', { contract: 1 })).toMatchObject({ dialogs: true, uploads: false });
    expect(await heard('started')).toEqual({ kind: 'started', problem: null });

    const chosen = client.call('chooseFile', { purpose: 'open' });
    const { number, wish } = await heard('dialog');
    expect(wish).toEqual({ dialog: 'file', purpose: 'open' });
    toHost({ kind: 'chosen', number, path: demo });
    const token = await chosen;
    expect(token?.name).toBe('boathouse.needlebeat.json');
    await client.call('openFile', { token: token?.token ?? '' });
    await vi.waitFor(
      async () =>
        expect((await heard('document')).facts).toEqual({
          dirty: false,
          name: 'boathouse.needlebeat.json',
          hasPlace: true,
        }),
      20_000,
    );

    toHost({ kind: 'token', number: 7, path: '/videos/dropped.mp4' });
    const reply = await heard('reply');
    expect(reply).toMatchObject({ number: 7, token: { name: 'dropped.mp4' }, problem: null });

    const commands: string[] = [];
    client.on('command', ({ id }) => commands.push(id));
    toHost({ kind: 'command', id: 'undo' });
    await vi.waitFor(() => expect(commands).toEqual(['undo']), 20_000);
    client.close();
  });

  it('saves where the shell says, and says why it can’t', async () => {
    start();
    const client = openWindow();
    await client.call('openDemo', {});
    toHost({ kind: 'save', number: 1, path: null });
    await vi.waitFor(
      async () =>
        expect(await heard('reply')).toMatchObject({ number: 1, problem: expect.stringContaining('no file yet') }),
      20_000,
    );
    toHost({ kind: 'save', number: 2, path: join(home, 'out/s.needlebeat.json') });
    await vi.waitFor(async () => expect(await heard('reply')).toMatchObject({ number: 2, problem: null }), 20_000);
    expect(JSON.parse(await readFile(join(home, 'out/s.needlebeat.json'), 'utf8')).format).toBe('needlebeat/session');
    client.close();
  });

  it('starts empty where the file named can’t be used, and says so', async () => {
    start(join(home, 'nothing.mp4'));
    const { problem } = await heard('started');
    expect(problem).toBe('nothing.mp4: there is no such file; a recording or a session file was expected.');
    toHost({ kind: 'close', number: 3, discard: false });
    await vi.waitFor(() => expect(exit).toHaveBeenCalledWith(0), 20_000);
    expect(await readdir(join(home, 'work'))).toEqual([]);
  });
});
