import { extname } from 'node:path';
import { type BrowserWindow, dialog, type FileFilter } from 'electron';
import type { DialogWish } from './host-messages.ts';

const recordings: FileFilter = {
  name: 'Recordings',
  extensions: ['mp4', 'mov', 'm4v', 'mkv', 'webm', 'avi', '3gp', 'mts'],
};
const sessions: FileFilter = { name: 'Sessions', extensions: ['needlebeat.json', 'json'] };
const anything: FileFilter = { name: 'All files', extensions: ['*'] };

/** Shows the native dialog that the host wants. @returns absolute path, null: the user thought better of it. */
export async function showDialog(window: BrowserWindow, wish: DialogWish): Promise<string | null> {
  switch (wish.dialog) {
    case 'file': {
      const both = { name: 'Recordings and sessions', extensions: [...recordings.extensions, 'json'] };
      const filters = wish.purpose === 'open' ? [both, sessions, recordings, anything] : [recordings, anything];
      const { canceled, filePaths } = await dialog.showOpenDialog(window, { properties: ['openFile'], filters });
      return canceled ? null : (filePaths[0] ?? null);
    }
    case 'place':
      return choosePlace(window, wish.suggestedName);
    case 'folder': {
      const properties = ['openDirectory', 'createDirectory'] as const;
      const { canceled, filePaths } = await dialog.showOpenDialog(window, { properties: [...properties] });
      return canceled ? null : (filePaths[0] ?? null);
    }
    default:
      return wish satisfies never;
  }
}

/** The save dialog, which asks itself before a file is replaced. */
export async function choosePlace(window: BrowserWindow, suggestedName: string): Promise<string | null> {
  const extension = extname(suggestedName).slice(1);
  const own = extension ? [{ name: extension.toUpperCase(), extensions: [extension] }] : [];
  const options = { defaultPath: suggestedName, filters: [...own, anything] };
  const { canceled, filePath } = await dialog.showSaveDialog(window, options);
  return canceled || !filePath ? null : filePath;
}
