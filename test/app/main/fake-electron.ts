import { EventEmitter } from 'node:events';
import { vi } from 'vitest';

/** Stands in for Electron's module in tests: what is asked of it is noted, nothing is started. The real one would fetch its runtime. */
export function fakeElectron() {
  const order: string[] = [];
  const note = (name: string) => {
    order.push(name);
  };
  const app = Object.assign(new EventEmitter(), {
    isPackaged: false,
    enableSandbox: () => note('enableSandbox'),
    requestSingleInstanceLock: vi.fn(() => true),
    whenReady: async () => note('ready'),
    getPath: () => '/nowhere',
    quit: vi.fn(),
    exit: vi.fn(),
  });
  const session = {
    protocol: { handle: vi.fn(), unhandle: vi.fn() },
    setPermissionRequestHandler: vi.fn(),
    setPermissionCheckHandler: vi.fn(),
    setDevicePermissionHandler: vi.fn(),
  };
  const windows: FakeWindow[] = [];
  class FakeWindow extends EventEmitter {
    readonly options: { webPreferences: Record<string, unknown> };
    readonly webContents = {
      mainFrame: { url: 'app://needlebeat/index.html', postMessage: vi.fn() },
      reload: vi.fn(),
      printToPDF: vi.fn(async (_options: object) => new Uint8Array([37, 80, 68, 70])),
    };
    readonly loaded: string[] = [];
    title = '';
    constructor(options: { webPreferences: Record<string, unknown> }) {
      super();
      this.options = options;
      windows.push(this);
    }
    loadURL = async (url: string) => void this.loaded.push(url);
    setTitle = (title: string) => {
      this.title = title;
    };
    setDocumentEdited = vi.fn();
    isMaximized = () => false;
    isMinimized = () => false;
    getNormalBounds = () => ({ x: 0, y: 0, width: 1000, height: 700 });
    focus = vi.fn();
    show = vi.fn();
    maximize = vi.fn();
    destroy = vi.fn();
    close = () => void this.emit('close', { preventDefault: () => undefined });
  }
  const processes: FakeProcess[] = [];
  class FakeProcess extends EventEmitter {
    readonly posted: { kind: string; number?: number; ports: unknown[] }[] = [];
    postMessage(message: { kind: string }, ports: unknown[] = []) {
      this.posted.push({ ...message, ports });
    }
    kill = vi.fn();
  }
  const ipcMain = Object.assign(new EventEmitter(), { handle: vi.fn() });
  return {
    order,
    windows,
    processes,
    session: { fromPartition: vi.fn(() => session) },
    fakeSession: session,
    app,
    protocol: { registerSchemesAsPrivileged: vi.fn(() => note('registerSchemes')) },
    BrowserWindow: FakeWindow,
    dialog: {
      showMessageBox: vi.fn(async () => ({ response: 0 })),
      showOpenDialog: vi.fn(),
      showSaveDialog: vi.fn(async () => ({ canceled: true, filePath: '' })),
    },
    ipcMain,
    Menu: { setApplicationMenu: vi.fn(), buildFromTemplate: vi.fn((template: unknown) => template) },
    MessageChannelMain: class {
      port1 = 'port 1';
      port2 = 'port 2';
    },
    screen: { getAllDisplays: () => [{ workArea: { x: 0, y: 0, width: 1920, height: 1080 } }] },
    utilityProcess: {
      fork: vi.fn(() => {
        const child = new FakeProcess();
        processes.push(child);
        return child;
      }),
    },
  };
}
