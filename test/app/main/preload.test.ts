import { EventEmitter } from 'node:events';
import { runInNewContext } from 'node:vm';
import { MessageChannel } from 'node:worker_threads';
import { build } from 'vite';
import { describe, expect, it, vi } from 'vitest';
import { connectHost } from '../../../app/contract/client.ts';
import { shellChannels } from '../../../app/contract/shell-channels.ts';
import type { Transport } from '../../../app/contract.ts';
import { type Handlers, serveWindow } from '../../../app/host/serve-window.ts';
import { portTransport } from '../../../app/main/port-transport.ts';
import { makeBridge } from '../../../app/preload/bridge.ts';

function fakeIpc() {
  return Object.assign(new EventEmitter(), { send: vi.fn(), invoke: vi.fn(async () => ({ token: 't', name: 'n' })) });
}

describe('the bridge', () => {
  it('speaks the contract over the port that the shell hands over, with what was sent before', async () => {
    const ipc = fakeIpc();
    const bridge = makeBridge({ ipc: ipc as never, webUtils: { getPathForFile: () => '' } });
    expect(ipc.send.mock.calls).toEqual([[shellChannels.port]]);
    const client = connectHost(bridge as Transport);
    const early = client.call('frameTimes', { recording: 'A' });
    const { port1, port2 } = new MessageChannel();
    // Node's ports have the events of the page's; Electron's own put the message into `data`.
    const hostPort = Object.assign(new EventEmitter(), {
      postMessage: (message: unknown) => port1.postMessage(message),
      start: () => port1.start(),
      close: () => port1.close(),
    });
    port1.on('message', (data) => hostPort.emit('message', { data }));
    port1.on('close', () => hostPort.emit('close'));
    const handlers = { frameTimes: () => ({ time_s: new Float64Array([0, 0.5]) }) } as unknown as Handlers;
    const link = serveWindow(portTransport(hostPort as never), handlers, () => undefined);
    ipc.emit(shellChannels.port, { ports: [port2] });
    expect(await early).toEqual({ time_s: new Float64Array([0, 0.5]) });
    client.close();
    await expect.poll(() => link.gone.aborted).toBe(true);
  });

  it('takes the path of a dropped file to the shell and gives the page a token', async () => {
    const ipc = fakeIpc();
    const bridge = makeBridge({ ipc: ipc as never, webUtils: { getPathForFile: () => '/videos/a.mp4' } });
    expect(await bridge.tokenOf({} as File)).toEqual({ token: 't', name: 'n' });
    expect(ipc.invoke.mock.calls).toEqual([[shellChannels.droppedFile, '/videos/a.mp4']]);
  });
});

describe('the bundled preload script', () => {
  it('is one file that needs Electron alone and exposes the bridge and nothing else', async () => {
    const configFile = new URL('../../../vite.preload.config.ts', import.meta.url).pathname;
    const built = await build({ configFile, logLevel: 'silent', build: { write: false } });
    const outputs = (Array.isArray(built) ? built : [built]).flatMap((b) => ('output' in b ? b.output : []));
    expect(outputs.map((o) => o.fileName)).toEqual(['preload.cjs']);
    const [chunk] = outputs;
    const code = chunk?.type === 'chunk' ? chunk.code : '';
    const exposed: [string, object][] = [];
    const required: string[] = [];
    const electron = {
      contextBridge: { exposeInMainWorld: (name: string, api: object) => exposed.push([name, api]) },
      ipcRenderer: fakeIpc(),
      webUtils: { getPathForFile: () => '' },
    };
    runInNewContext(code, {
      require: (name: string) => {
        required.push(name);
        return electron;
      },
      exports: {},
      module: { exports: {} },
    });
    expect(required).toEqual(['electron']);
    expect(exposed).toHaveLength(1);
    const [name, api] = exposed[0] ?? ['', {}];
    expect(name).toBe('needlebeat');
    expect(Object.keys(api).sort()).toEqual(['close', 'onClose', 'onMessage', 'send', 'tokenOf']);
    for (const member of Object.values(api)) expect(typeof member).toBe('function');
  });
});
