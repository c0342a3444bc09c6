import { describe, expect, it } from 'vitest';
import { connectHost } from '../../app/contract/client.ts';
import { calls, commands, decodeFrame, encodeFrame, events, isEnabled } from '../../app/contract.ts';
import { directTransport } from '../../app/host/direct-transport.ts';
import { type Handlers, Refusal, serveWindow } from '../../app/host/serve-window.ts';

/** Handlers that note what reaches them; only those named answer. */
function linked(handlers: Partial<Handlers>) {
  const reports: unknown[] = [];
  const { window, host } = directTransport();
  const link = serveWindow(host, handlers as Handlers, (error) => reports.push(error));
  return { client: connectHost(window), transport: window, link, reports };
}

describe('parsers of the calls', () => {
  const session = {
    format: 'needlebeat/session',
    version: 1,
    recordings: [{ id: 'A', file: 'a.mp4' }],
    views: [],
    segments: [],
  };

  it.each([
    ['openFile', { token: '' }],
    ['openFile', { token: 'x', path: '/etc/passwd' }],
    ['edit', { session: { ...session, extra: 1 }, base: 0, label: 'x' }],
    ['edit', { session, base: 0.5, label: 'x' }],
    ['picture', { recording: 'A', frame: -1, maxWidth_px: 640 }],
    ['picture', { recording: 'A', frame: 0, maxWidth_px: 1e6 }],
    ['picture', { recording: 'A', frame: Number.NaN, maxWidth_px: 640 }],
    ['filmStrip', { recording: 'A', start_s: 0, end_s: 1, count: 1e9, maxWidth_px: 64 }],
    ['follow', { view: 7 }],
    ['saveBytes', { name: 'a.png', bytes: [1, 2, 3] }],
    ['exportItem', { item: { kind: 'trace' } }],
    ['exportItem', { item: { kind: 'anything' } }],
    ['findBar', { recording: 'A', frame: 0, view: { kind: 'side', region: { x: 0, y: 0, width: 9, height: 9 } } }],
    ['previewFit', { view: 'v1', start_s: Number.POSITIVE_INFINITY, end_s: 2, lane: 'a' }],
    ['undo', { steps: 3 }],
  ] as const)('%s refuses %j', (name, args) => {
    expect(calls[name].args.safeParse(args).success).toBe(false);
  });

  it('take what is right', () => {
    expect(calls.edit.args.safeParse({ session, base: 3, label: 'Draw a region', merge: 'region' }).success).toBe(true);
    expect(calls.saveBytes.args.safeParse({ name: 'a.png', bytes: new Uint8Array(3) }).success).toBe(true);
    expect(events.command.safeParse({ id: 'undo' }).success).toBe(true);
    expect(events.command.safeParse({ id: 'format-disk' }).success).toBe(false);
  });
});

describe('answering a window', () => {
  it('refuses names that are not in the contract, those of Object included', async () => {
    const { transport, link, reports } = linked({});
    const answers: unknown[] = [];
    transport.onMessage((message) => answers.push(message));
    for (const [id, name] of ['toString', '__proto__', 'constructor', 'nothing', ''].entries()) {
      transport.send({ kind: 'call', id, name, args: {} });
    }
    await expect.poll(() => answers.length).toBe(5);
    for (const answer of answers) expect(answer).toMatchObject({ ok: false, error: { reason: 'unknown_call' } });
    expect(reports).toEqual([]);
    expect(link.gone.aborted).toBe(false);
  });

  it('never lets bad arguments reach a handler, and says which field is wrong', async () => {
    const reached: unknown[] = [];
    const { client } = linked({
      openFile: (args) => {
        reached.push(args);
        return { opened: 'session' };
      },
    });
    await expect(client.call('openFile', { token: 5 } as never)).rejects.toMatchObject({
      reason: 'bad_argument',
      message: 'openFile: token must be a text; not 5.',
    });
    expect(reached).toEqual([]);
  });

  it('tells the window nothing of a mistake of the program but that there was one', async () => {
    const { client, reports } = linked({
      undo: () => {
        throw new Error('at /home/somebody/secret.ts:12');
      },
    });
    const failure = await client.call('undo', {}).catch((error: unknown) => error);
    expect(failure).toMatchObject({ reason: 'internal' });
    expect(String(failure)).not.toContain('secret');
    expect(reports).toHaveLength(1);
  });

  it('passes a refusal on, without the way to a file', async () => {
    const { client } = linked({
      undo: () => {
        throw new Refusal('stale_revision', 'Too late.');
      },
    });
    await expect(client.call('undo', {})).rejects.toMatchObject({ reason: 'stale_revision', message: 'Too late.' });
  });

  it('aborts the handler when the call is taken back, and when the window goes', async () => {
    const signals: AbortSignal[] = [];
    const { client, link } = linked({
      about: (_args, { signal }) => {
        signals.push(signal);
        return new Promise((_, reject) => signal.addEventListener('abort', () => reject(signal.reason)));
      },
    });
    const taken = new AbortController();
    const first = client.call('about', {}, taken.signal);
    const second = client.call('about', {});
    await expect.poll(() => signals.length).toBe(2);
    taken.abort();
    await expect(first).rejects.toMatchObject({ reason: 'cancelled' });
    await expect.poll(() => signals[0]?.aborted).toBe(true);
    expect(signals[1]?.aborted).toBe(false);
    client.close();
    await expect(second).rejects.toMatchObject({ reason: 'closed' });
    expect(signals[1]?.aborted).toBe(true);
    expect(link.gone.aborted).toBe(true);
  });

  it('refuses an answer that is not what the contract says', async () => {
    const { client } = linked({ frameTimes: () => ({ time_s: [1, 2] }) as never });
    await expect(client.call('frameTimes', { recording: 'A' })).rejects.toMatchObject({ reason: 'internal' });
  });

  it('delivers events to those who listen, checked', async () => {
    const { client, link } = linked({});
    const heard: unknown[] = [];
    const off = client.on('command', (event) => heard.push(event));
    link.send('command', { id: 'save' });
    link.send('command', { id: 'nonsense' } as never);
    await expect.poll(() => heard.length).toBe(1);
    off();
    link.send('command', { id: 'undo' });
    await new Promise((resolve) => setTimeout(resolve, 20));
    expect(heard).toEqual([{ id: 'save' }]);
  });
});

describe('binary frame', () => {
  it('brings back what went in, typed arrays by value', () => {
    const message = {
      a: new Float64Array([1.5, -0.1, 1e-300]),
      b: [new Uint8Array([1, 2, 3]), { c: new Int32Array([-7]), d: null, e: 'ü' }],
      empty: new Float64Array(),
      view: new Uint8Array([9, 8, 7, 6]).subarray(1, 3),
    };
    expect(decodeFrame(encodeFrame(message))).toEqual({ ...message, view: new Uint8Array([8, 7]) });
  });

  it('refuses frames that are cut short or point outside of themselves', () => {
    const frame = encodeFrame({ a: new Float64Array(4) });
    for (let length = 0; length < frame.length; length += 5) {
      expect(() => decodeFrame(frame.slice(0, length))).toThrow();
    }
    const forged = (reference: unknown) => encodeFrame({ x: { $bytes: reference } });
    expect(() => decodeFrame(forged(['f64', 0, 80]))).toThrow(RangeError);
    expect(() => decodeFrame(forged(['f64', -8, 8]))).toThrow(RangeError);
    expect(() => decodeFrame(forged(['f64', 0, 7]))).toThrow(RangeError);
    expect(decodeFrame(forged(['constructor', 0, 8]))).toEqual({ x: { $bytes: ['constructor', 0, 8] } });
  });

  it('keeps nobody from the prototype', () => {
    const text = new TextEncoder().encode('{"__proto__":{"polluted":true}}');
    const frame = new Uint8Array(4 + text.length);
    new DataView(frame.buffer).setUint32(0, text.length, true);
    frame.set(text, 4);
    const message = decodeFrame(frame) as Record<string, unknown>;
    expect(message.polluted).toBeUndefined();
    expect(({} as Record<string, unknown>).polluted).toBeUndefined();
  });
});

describe('command table', () => {
  it('has each id and each accelerator once', () => {
    const ids = commands.map((c) => c.id);
    expect(new Set(ids).size).toBe(ids.length);
    const keys = commands.map((c) => c.accelerator).filter((key) => key !== null);
    expect(new Set(keys).size).toBe(keys.length);
  });

  it('enables a command only when all it needs is there', () => {
    const state = {
      recording: true,
      view: false,
      segment: false,
      results: false,
      canUndo: true,
      canRedo: false,
      busy: false,
    };
    const enabled = commands.filter((c) => isEnabled(c, state)).map((c) => c.id);
    expect(enabled).toContain('undo');
    expect(enabled).toContain('open');
    expect(enabled).not.toContain('redo');
    expect(enabled).not.toContain('follow');
    expect(enabled).not.toContain('export-csv');
  });
});
