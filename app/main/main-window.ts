import { BrowserWindow, type Session } from 'electron';
import { pageAddress } from '../contract/shell-channels.ts';
import type { WindowState } from './window-state.ts';

/** The one window, closed to everything but its page. @param preload absolute path of the bundled preload script. */
export function makeWindow(session: Session, preload: string, state: WindowState): BrowserWindow {
  const { x, y, width, height } = state;
  const window = new BrowserWindow({
    x,
    y,
    width,
    height,
    minWidth: 720,
    minHeight: 480,
    title: 'Needlebeat',
    show: false,
    webPreferences: {
      session,
      preload,
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webviewTag: false,
      webSecurity: true,
      spellcheck: false,
      navigateOnDragDrop: false,
      disableDialogs: true,
    },
  });
  if (state.maximized) window.maximize();
  window.once('ready-to-show', () => window.show());
  window.on('page-title-updated', (event) => event.preventDefault());
  void window.loadURL(pageAddress);
  return window;
}
