import { existsSync } from 'node:fs';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { pageAddress, shellChannels } from '../../../app/contract/shell-channels.ts';
import { fakeElectron } from './fake-electron.ts';

vi.mock('../../../app/page/page-files.ts', () => ({ readPageFiles: async () => new Map() }));

type Fake = ReturnType<typeof fakeElectron>;

/** Loads the desktop program's entry over a fresh stand-in for Electron. */
async function start(change: (fake: Fake) => void = () => undefined): Promise<Fake> {
  vi.resetModules();
  const fake = fakeElectron();
  change(fake);
  vi.doMock('electron', () => fake);
  await import('../../../app/main/main.ts');
  await vi.waitFor(() => expect(fake.processes.length + fake.app.quit.mock.calls.length).toBeGreaterThan(0), 20_000);
  return fake;
}

describe('the desktop shell', () => {
  let fake: Fake;
  beforeEach(async () => {
    fake = await start();
  });
  const window = () => fake.windows[0]!;
  const host = () => fake.processes.at(-1)!;
  const ours = () => ({ sender: window().webContents, senderFrame: window().webContents.mainFrame });

  it('closes the sandbox and names its scheme before Electron is ready', () => {
    expect(fake.order).toEqual(['enableSandbox', 'registerSchemes', 'ready']);
    const [[schemes]] = fake.protocol.registerSchemesAsPrivileged.mock.calls as unknown as [[unknown]];
    expect(schemes).toEqual([{ scheme: 'app', privileges: { standard: true, secure: true } }]);
  });

  it('gives the page nothing: sandbox, isolation, no node, no webview, nothing kept on disk', () => {
    expect(window().options.webPreferences).toMatchObject({
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webviewTag: false,
      webSecurity: true,
      spellcheck: false,
    });
    expect(window().loaded).toEqual([pageAddress]);
    const [[partition]] = fake.session.fromPartition.mock.calls as unknown as [[string]];
    expect(partition.startsWith('persist:')).toBe(false);
  });

  it('denies every permission but writing to the clipboard', () => {
    const [[ask]] = fake.fakeSession.setPermissionRequestHandler.mock.calls as [[(...a: unknown[]) => void]];
    const [[check]] = fake.fakeSession.setPermissionCheckHandler.mock.calls as [[(...a: unknown[]) => boolean]];
    const [[device]] = fake.fakeSession.setDevicePermissionHandler.mock.calls as [[() => boolean]];
    for (const permission of [
      'media',
      'geolocation',
      'notifications',
      'clipboard-read',
      'fileSystem',
      'openExternal',
    ]) {
      const answers: boolean[] = [];
      ask(null, permission, (answer: boolean) => answers.push(answer));
      expect([...answers, check(null, permission)], permission).toEqual([false, false]);
    }
    expect(check(null, 'clipboard-sanitized-write')).toBe(true);
    expect(device()).toBe(false);
  });

  it('lets no page go anywhere', async () => {
    const { EventEmitter } = await import('node:events');
    const contents = Object.assign(new EventEmitter(), { setWindowOpenHandler: vi.fn() });
    fake.app.emit('web-contents-created', {}, contents);
    const [[openHandler]] = contents.setWindowOpenHandler.mock.calls as [[() => unknown]];
    expect(openHandler()).toEqual({ action: 'deny' });
    const prevented = (name: string, facts: object) => {
      let stopped = false;
      contents.emit(name, { ...facts, preventDefault: () => (stopped = true) });
      return stopped;
    };
    for (const url of ['https://example.org/', 'file:///etc/passwd', 'app://other/index.html', 'app://needlebeat/x']) {
      expect(prevented('will-navigate', { url }), url).toBe(true);
      expect(prevented('will-frame-navigate', { url, isMainFrame: true }), url).toBe(true);
    }
    expect(prevented('will-frame-navigate', { url: pageAddress, isMainFrame: false })).toBe(true);
    expect(prevented('will-redirect', { url: pageAddress })).toBe(true);
    expect(prevented('will-attach-webview', {})).toBe(true);
    expect(prevented('will-navigate', { url: pageAddress })).toBe(false);
  });

  it('hands a port to the main frame of its own window alone', () => {
    const { mainFrame } = window().webContents;
    const before = host().posted.length;
    fake.ipcMain.emit(shellChannels.port, { sender: window().webContents, senderFrame: { url: pageAddress } });
    fake.ipcMain.emit(shellChannels.port, { sender: {}, senderFrame: mainFrame });
    fake.ipcMain.emit(shellChannels.port, { sender: window().webContents, senderFrame: null });
    expect(host().posted).toHaveLength(before);
    fake.ipcMain.emit(shellChannels.port, ours());
    expect(host().posted.at(-1)).toEqual({ kind: 'window', ports: ['port 1'] });
    expect(mainFrame.postMessage).toHaveBeenCalledWith(shellChannels.port, null, ['port 2']);
    mainFrame.url = 'https://example.org/';
    fake.ipcMain.emit(shellChannels.port, ours());
    expect(mainFrame.postMessage).toHaveBeenCalledTimes(1);
  });

  it('turns a dropped file into a token, for its own page and for paths alone', async () => {
    const [[channel, handler]] = fake.ipcMain.handle.mock.calls as [[string, (...a: unknown[]) => Promise<unknown>]];
    expect(channel).toBe(shellChannels.droppedFile);
    for (const path of [7, null, '', 'relative.mp4', `/${'x'.repeat(5000)}`])
      expect(() => handler(ours(), path)).toThrow();
    expect(() => handler({ sender: {}, senderFrame: null }, '/tmp/a.mp4')).toThrow();
    const answer = handler(ours(), '/tmp/a.mp4');
    const { number } = host().posted.at(-1)!;
    expect(host().posted.at(-1)).toMatchObject({ kind: 'token', path: '/tmp/a.mp4' });
    const token = { token: 'abc', name: 'a.mp4' };
    host().emit('message', { kind: 'reply', number, token, problem: null });
    expect(await answer).toEqual(token);
  });

  it('starts the host in its own process with what the built program has', () => {
    const [[entry]] = fake.utilityProcess.fork.mock.calls as unknown as [[string]];
    expect(entry).toMatch(/app[\\/]main[\\/]host-entry\.js$/);
    expect(host().posted[0]).toMatchObject({ kind: 'start' });
  });

  it('closes at once when nothing is unsaved', async () => {
    host().emit('message', { kind: 'document', facts: { dirty: false, name: 'a.needlebeat.json', hasPlace: true } });
    expect(window().title).toBe('a.needlebeat.json – Needlebeat');
    window().close();
    await vi.waitFor(() => expect(host().posted.at(-1)).toMatchObject({ kind: 'close', discard: false }), 20_000);
    expect(fake.dialog.showMessageBox).not.toHaveBeenCalled();
    host().emit('exit', 0);
    await vi.waitFor(() => expect(window().destroy).toHaveBeenCalled(), 20_000);
    expect(fake.app.quit).toHaveBeenCalled();
  });

  it.each([
    [
      'Save',
      0,
      [
        { kind: 'save', path: null },
        { kind: 'close', discard: false },
      ],
    ],
    ['Don’t save', 1, [{ kind: 'close', discard: true }]],
    ['Cancel', 2, []],
  ] as const)('asks about unsaved work: %s', async (_label, response, expected) => {
    host().emit('message', { kind: 'document', facts: { dirty: true, name: 'a.needlebeat.json', hasPlace: true } });
    expect(window().title).toContain('•');
    fake.dialog.showMessageBox.mockResolvedValueOnce({ response });
    const before = host().posted.length;
    window().close();
    await vi.waitFor(() => expect(fake.dialog.showMessageBox).toHaveBeenCalledTimes(1), 20_000);
    if (response === 0) {
      await vi.waitFor(() => expect(host().posted.length).toBe(before + 1), 20_000);
      host().emit('message', { kind: 'reply', number: host().posted.at(-1)?.number, token: null, problem: null });
    }
    await vi.waitFor(() => expect(host().posted.length).toBe(before + expected.length), 20_000);
    await new Promise((resolve) => setTimeout(resolve, 20));
    expect(host().posted.slice(before)).toMatchObject(expected);
  });

  it('stays open when saving fails, and says why', async () => {
    host().emit('message', { kind: 'document', facts: { dirty: true, name: 'a.needlebeat.json', hasPlace: true } });
    fake.dialog.showMessageBox.mockResolvedValueOnce({ response: 0 });
    window().close();
    await vi.waitFor(() => expect(host().posted.at(-1)?.kind).toBe('save'), 20_000);
    const problem = 'a.needlebeat.json: it can’t be written here.';
    host().emit('message', { kind: 'reply', number: host().posted.at(-1)?.number, token: null, problem });
    await vi.waitFor(() => expect(fake.dialog.showMessageBox).toHaveBeenCalledTimes(2), 20_000);
    expect(host().posted.at(-1)?.kind).toBe('save');
    expect(window().destroy).not.toHaveBeenCalled();
  });

  it('offers to start the host again when it dies', async () => {
    fake.dialog.showMessageBox.mockResolvedValueOnce({ response: 0 });
    host().emit('exit', 5);
    await vi.waitFor(() => expect(fake.processes).toHaveLength(2), 20_000);
    expect(host().posted[0]).toMatchObject({ kind: 'start', file: null });
    expect(window().webContents.reload).toHaveBeenCalled();
  });

  it('prints a page to PDF in a hidden window that runs no script and reaches nothing', async () => {
    const html = '<!doctype html><title>Report</title>';
    host().emit('message', { kind: 'print', number: 12, html });
    await vi.waitFor(() => expect(host().posted.at(-1)).toMatchObject({ kind: 'printed', number: 12 }), 20_000);
    expect(host().posted.at(-1)).toMatchObject({ pdf: new Uint8Array([37, 80, 68, 70]) });
    const hidden = fake.windows.at(-1)!;
    expect(hidden.options).toMatchObject({
      show: false,
      webPreferences: { javascript: false, sandbox: true, contextIsolation: true, nodeIntegration: false },
    });
    expect(hidden.options.webPreferences).not.toHaveProperty('preload');
    const [partition] = fake.session.fromPartition.mock.calls.at(-1) as unknown as [string];
    expect(partition.startsWith('persist:')).toBe(false);
    expect(fake.fakeSession.setPermissionRequestHandler).toHaveBeenCalledTimes(2);

    const [address] = hidden.loaded;
    const [, serve] = fake.fakeSession.protocol.handle.mock.calls.at(-1) as [string, (r: { url: string }) => Response];
    const page = serve({ url: address! });
    expect(await page.text()).toBe(html);
    const policy = page.headers.get('Content-Security-Policy') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toContain('script-src');
    expect(serve({ url: pageAddress }).status).toBe(404);
    expect(hidden.destroy).toHaveBeenCalled();
    expect(window().destroy).not.toHaveBeenCalled();
  });

  it('prints nothing that isn’t a page', async () => {
    for (const html of [null, 7, 'plain text', `<!doctype html>${'x'.repeat(64 * 1024 * 1024)}`]) {
      host().emit('message', { kind: 'print', number: 13, html });
      await vi.waitFor(() => expect(host().posted.at(-1)).toMatchObject({ kind: 'printed', pdf: null }), 20_000);
      host().posted.push({ kind: 'seen', ports: [] });
    }
    expect(fake.windows).toHaveLength(1);
  });

  it('passes the file of a second start on, checked to be one', () => {
    const before = host().posted.length;
    fake.app.emit('second-instance', {}, [], '/', { arguments: ['.', '--flag', '/no/such/file.mp4'] });
    fake.app.emit('second-instance', {}, [], '/', { arguments: 'nonsense' });
    expect(host().posted).toHaveLength(before);
    const file = new URL('../../../package.json', import.meta.url).pathname;
    expect(existsSync(file)).toBe(true);
    fake.app.emit('second-instance', {}, [], '/', { arguments: ['.', file] });
    expect(host().posted.at(-1)).toMatchObject({ kind: 'requestOpen', path: file });
  });
});

it('leaves the place to the one that runs already', async () => {
  const fake = await start((f) => f.app.requestSingleInstanceLock.mockReturnValue(false));
  expect(fake.app.quit).toHaveBeenCalled();
  expect(fake.windows).toEqual([]);
});
