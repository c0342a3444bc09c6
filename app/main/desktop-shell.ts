import { availableParallelism } from 'node:os';
import { dirname, isAbsolute, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { app, type BrowserWindow, dialog, ipcMain, Menu, MessageChannelMain, screen, session } from 'electron';
import { shellChannels } from '../contract/shell-channels.ts';
import { userFolderPath } from '../host/user-folder.ts';
import { packageRoot } from '../page/package-root.ts';
import { readPageFiles } from '../page/page-files.ts';
import { choosePlace, showDialog } from './file-dialogs.ts';
import { HostLink } from './host-link.ts';
import type { DocumentFacts } from './host-messages.ts';
import { makeWindow } from './main-window.ts';
import { firstMenu, type MenuFacts, menuTemplate } from './menu-template.ts';
import { denyPermissions } from './navigation.ts';
import { fileAmong } from './opened-file.ts';
import { servePage } from './page-protocol.ts';
import { printPage } from './print-page.ts';
import { isOurPage } from './sender.ts';
import { placeWindow, readWindowState, writeWindowState } from './window-state.ts';

const here = dirname(fileURLToPath(import.meta.url));
const root = packageRoot() ?? here;

/** Starts the desktop program: window, menu, dialogs, and the host in its own process. */
export async function startShell(): Promise<void> {
  await app.whenReady();
  const stateFile = join(app.getPath('userData'), 'window.json');
  // In memory only: the page keeps nothing.
  const pages = session.fromPartition('needlebeat');
  denyPermissions(pages);
  servePage(pages, await readPageFiles(join(root, 'dist/window')));

  let facts: DocumentFacts = { dirty: false, name: '', hasPlace: false };
  let leaving = false;
  const areas = screen.getAllDisplays().map((display) => display.workArea);
  const window = makeWindow(
    pages,
    join(root, 'dist/app/preload/preload.cjs'),
    placeWindow(readWindowState(stateFile), areas),
  );
  let host = startHostProcess(fileAmong(process.argv.slice(app.isPackaged ? 1 : 2), process.cwd()));
  showMenu(firstMenu);

  function startHostProcess(file: string | null): HostLink {
    const start = {
      kind: 'start',
      userFolder: userFolderPath(process.env, process.platform),
      cores: Math.max(1, availableParallelism()),
      demo: unpacked(join(root, 'samples/boathouse/boathouse.needlebeat.json')),
      runtime: ['electron', 'chrome', 'node'].map((name) => ({ name, version: process.versions[name] ?? '' })),
      file,
    } as const;
    return new HostLink(
      join(here, 'host-entry.js'),
      { ...start, runtime: [...start.runtime] },
      {
        started: (problem) => {
          if (problem !== null) void dialog.showMessageBox(window, { type: 'warning', message: problem });
        },
        document: (next) => {
          facts = next;
          window.setTitle(titleOf(facts));
          window.setDocumentEdited(facts.dirty);
        },
        menu: showMenu,
        dialog: (wish) => showDialog(window, wish),
        print: printPage,
        died: () => void hostDied(),
      },
    );
  }

  function showMenu(menu: MenuFacts): void {
    const template = menuTemplate(menu, process.platform, (id) => host.command(id));
    Menu.setApplicationMenu(Menu.buildFromTemplate(template));
  }

  async function hostDied(): Promise<void> {
    const { response } = await dialog.showMessageBox(window, {
      type: 'error',
      message: 'The measuring part of Needlebeat has ended unexpectedly.',
      detail: 'The session is safe. Start it again to go on where you were.',
      buttons: ['Start again', 'Quit'],
      cancelId: 1,
    });
    if (response === 1) return leave(false);
    host = startHostProcess(null);
    window.webContents.reload();
  }

  async function leave(discard: boolean): Promise<void> {
    leaving = true;
    const { x, y, width, height } = window.getNormalBounds();
    await writeWindowState(stateFile, { x, y, width, height, maximized: window.isMaximized() }).catch(() => undefined);
    await host.close(discard);
    window.destroy();
    app.quit();
  }

  window.on('close', (event) => {
    if (leaving) return;
    event.preventDefault();
    void mayLeave(window, host, facts).then((choice) => (choice === 'stay' ? undefined : leave(choice === 'discard')));
  });
  app.on('before-quit', (event) => {
    if (leaving) return;
    event.preventDefault();
    window.close();
  });
  app.on('window-all-closed', () => app.quit());
  app.on('second-instance', (_event, _args, cwd, given) => {
    if (window.isMinimized()) window.restore();
    window.focus();
    const { arguments: args } = (given ?? {}) as { arguments?: unknown };
    const texts = Array.isArray(args) ? args.filter((arg) => typeof arg === 'string') : [];
    const file = fileAmong(texts.slice(app.isPackaged ? 0 : 1), cwd);
    if (file !== null) host.requestOpen(file);
  });
  app.on('open-file', (event, path) => {
    event.preventDefault();
    host.requestOpen(path);
  });

  ipcMain.on(shellChannels.port, (event) => {
    if (!isOurPage(event, window.webContents)) return;
    const { port1, port2 } = new MessageChannelMain();
    host.connect(port1);
    event.senderFrame?.postMessage(shellChannels.port, null, [port2]);
  });
  ipcMain.handle(shellChannels.droppedFile, (event, path: unknown) => {
    const usable = typeof path === 'string' && path.length <= 4096 && isAbsolute(path);
    if (!isOurPage(event, window.webContents) || !usable) throw new Error('This is not a file of this computer.');
    return host.token(path);
  });
}

/** Asks what to do with work that no file holds. */
async function mayLeave(
  window: BrowserWindow,
  host: HostLink,
  facts: DocumentFacts,
): Promise<'leave' | 'discard' | 'stay'> {
  if (!facts.dirty) return 'leave';
  const { response } = await dialog.showMessageBox(window, {
    type: 'question',
    message: `Save the changes to ${facts.name}?`,
    detail: 'If you save nothing, they are lost.',
    buttons: ['Save', 'Don’t save', 'Cancel'],
    defaultId: 0,
    cancelId: 2,
  });
  if (response === 1) return 'discard';
  if (response === 2) return 'stay';
  const path = facts.hasPlace ? null : await choosePlace(window, facts.name);
  if (!facts.hasPlace && path === null) return 'stay';
  const problem = await host.save(path);
  if (problem === null) return 'leave';
  await dialog.showMessageBox(window, { type: 'error', message: problem });
  return 'stay';
}

function titleOf({ name, dirty }: DocumentFacts): string {
  if (name === '') return 'Needlebeat';
  return `${dirty ? '• ' : ''}${name} – Needlebeat`;
}

/** What ffmpeg reads must lie outside of the archive. */
function unpacked(path: string): string {
  return path.replace(/app\.asar(?=[\\/])/, 'app.asar.unpacked');
}
