import { contextBridge, ipcRenderer, webUtils } from 'electron';
import { makeBridge } from './bridge.ts';

/* Runs sandboxed before the page: one bundled CommonJS file, since a sandboxed one can't import. */
contextBridge.exposeInMainWorld('needlebeat', makeBridge({ ipc: ipcRenderer, webUtils }));
