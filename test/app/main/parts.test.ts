import { describe, expect, it, vi } from 'vitest';
import { commands } from '../../../app/contract.ts';
import { firstMenu, menuTemplate } from '../../../app/main/menu-template.ts';
import { fileAmong } from '../../../app/main/opened-file.ts';
import { answer } from '../../../app/main/page-protocol.ts';
import { placeWindow } from '../../../app/main/window-state.ts';

vi.mock('electron', () => ({ protocol: {} }));

describe('native menu', () => {
  const items = (facts = firstMenu, platform: NodeJS.Platform = 'linux', give = (_id: string) => {}) =>
    menuTemplate(facts, platform, give).flatMap((m) => (Array.isArray(m.submenu) ? m.submenu : []));

  it('holds every command of the table once', () => {
    const ids = items().flatMap((item) => (item.id === undefined ? [] : [item.id]));
    expect(ids).toEqual(commands.map((c) => c.id));
  });

  it('enables, labels and gives commands', () => {
    const given: string[] = [];
    const state = { ...firstMenu.state, canUndo: true };
    const menu = items({ state, undoLabel: 'Draw a region', redoLabel: null }, 'linux', (id) => given.push(id));
    const undo = menu.find((item) => item.id === 'undo');
    expect(undo).toMatchObject({ enabled: true, label: 'Undo: Draw a region' });
    expect(menu.find((item) => item.id === 'redo')?.enabled).toBe(false);
    const click = undo?.click as unknown as () => void;
    click();
    expect(given).toEqual(['undo']);
  });

  it('leaves plain keys to the window, where somebody may be typing', () => {
    for (const item of items()) {
      if (typeof item.accelerator !== 'string') continue;
      expect(item.registerAccelerator, item.accelerator).toBe(item.accelerator.startsWith('CmdOrCtrl+'));
    }
  });

  it('has the program’s own menu first on macOS', () => {
    expect(menuTemplate(firstMenu, 'darwin', () => {})[0]).toEqual({ role: 'appMenu' });
  });
});

describe('page scheme', () => {
  const files = new Map([['/index.html', { bytes: Buffer.from('page'), type: 'text/html' }]]);

  it('serves its table with a strict policy that connects nowhere', async () => {
    const page = answer(new Request('app://needlebeat/index.html?x=1'), files);
    expect([page.status, await page.text()]).toEqual([200, 'page']);
    const policy = page.headers.get('Content-Security-Policy') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("connect-src 'none'");
    expect(policy).not.toContain('unsafe');
  });

  it('serves nothing else', () => {
    const addresses = [
      'app://other/index.html',
      'app://needlebeat/../package.json',
      'app://needlebeat/',
      'app://needlebeat/x',
    ];
    for (const address of addresses) expect(answer(new Request(address), files).status, address).toBe(404);
    const post = new Request('app://needlebeat/index.html', { method: 'POST' });
    expect(answer(post, files).status).toBe(404);
  });
});

describe('place of the window', () => {
  const screen = { x: 0, y: 0, width: 1920, height: 1080 };
  it('is where it stood, if it can be seen there', () => {
    const stood = { x: 100, y: 50, width: 1200, height: 800, maximized: true };
    expect(placeWindow(stood, [screen])).toEqual(stood);
  });
  it.each([
    ['never stood anywhere', null],
    ['stood on a screen that is gone', { x: 2500, y: 50, width: 1200, height: 800, maximized: false }],
    ['stood above the screen', { x: 100, y: -700, width: 1200, height: 800, maximized: false }],
  ])('is in the middle when it %s', (_why, state) => {
    const { x, y, width, height } = placeWindow(state, [screen]);
    expect(2 * x + width).toBe(1920);
    expect(2 * y + height).toBe(1080);
  });
  it('is never larger than the screen', () => {
    const place = placeWindow({ x: 0, y: 0, width: 9000, height: 9000, maximized: false }, [screen]);
    expect([place.width, place.height]).toEqual([1920, 1080]);
  });
});

describe('file on the command line', () => {
  const here = new URL('../../../', import.meta.url).pathname;
  it('is the last argument that is a file', () => {
    expect(fileAmong(['--flag', 'README.md', 'package.json'], here)).toBe(`${here}package.json`);
    expect(fileAmong(['package.json', '--inspect'], here)).toBe(`${here}package.json`);
  });
  it('is none where there is none', () => {
    for (const args of [[], ['.'], ['src'], ['--x'], ['nothing.mp4'], ['a\0b']])
      expect(fileAmong(args, here)).toBeNull();
  });
});
