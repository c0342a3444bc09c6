import { type FfmpegTools, findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { TrackerPool } from '../../src/tracking/pool.ts';
import type { CommandId, FileToken, HostEvents, Transport } from '../contract.ts';
import { Calculator } from './calculator.ts';
import { ContentCache } from './content-cache.ts';
import { documentCalls } from './document-calls.ts';
import { Downloads } from './downloads.ts';
import { fitCalls } from './fit-calls.ts';
import { Jobs } from './jobs.ts';
import { KnownRecordings } from './known-recordings.ts';
import { LayoutFile } from './layout-file.ts';
import { MeasuredStore } from './measured-store.ts';
import { Measuring } from './measuring.ts';
import { OpenFiles } from './open-files.ts';
import { Overviews } from './overviews.ts';
import type { HostOptions, Parts } from './parts.ts';
import { pictureCalls } from './picture-calls.ts';
import { Pictures } from './pictures.ts';
import { RecentSessions } from './recent-sessions.ts';
import { Saving } from './saving.ts';
import { savingCalls } from './saving-calls.ts';
import { sessionInputs } from './segment-inputs.ts';
import { type Handlers, serveWindow, type WindowLink } from './serve-window.ts';
import { SessionKeeper } from './session-keeper.ts';
import { shellCalls } from './shell-calls.ts';
import { Tokens, type TokenUse } from './tokens.ts';
import { removeOldUploads } from './uploads.ts';
import { openUserFolder, type UserFolder } from './user-folder.ts';
import { claim, leftBehind, WorkingCopy } from './working-copy.ts';

/** The part of the program that does the work, whatever window there is. */
export interface Host {
  /** Answers a window until its transport closes. */
  connect(transport: Transport): void;
  /** Opens a session or a recording that was named on the command line. @throws InputError */
  openPath(path: string): Promise<void>;
  /** Has the window ask about opening a file that a second start named. */
  requestOpen(path: string): void;
  /** Passes a command of the native menu on to the windows. */
  command(id: CommandId): void;
  addToken(path: string, use: TokenUse, name?: string): FileToken;
  readonly downloads: Downloads | null;
  readonly folder: UserFolder;
  /** Whether there is work that no session file holds, and what its file is called. */
  unsaved(): { readonly dirty: boolean; readonly name: string; readonly hasPlace: boolean };
  /** Saves the session. @param path null: in its place. @throws InputError */
  save(path: string | null): Promise<void>;
  /** Ends everything: no process, thread or file is left open. @param discard throw the working copy away although it wasn't saved. */
  close(discard?: boolean): Promise<void>;
  [Symbol.asyncDispose](): Promise<void>;
}

/**
 * Starts the host: brings back what an earlier run left behind, unless `file` names something else to open.
 * @throws InputError where `file` can't be used.
 */
export async function startHost(options: HostOptions, file: string | null = null): Promise<Host> {
  const { env, cores, report } = options;
  const now_ms = options.now_ms ?? (() => performance.now());
  const now = options.now ?? (() => new Date().toISOString());
  const folder = await openUserFolder(options.userFolder);
  const cache = new ContentCache(folder.cache);
  const ending = new AbortController();
  const windows = new Set<WindowLink>();
  const broadcast = <K extends keyof HostEvents>(name: K, value: HostEvents[K]) => {
    for (const window of windows) window.send(name, value);
  };
  const tools = (): Promise<FfmpegTools> => findFfmpeg(env);

  const files = new OpenFiles(tools, () => void keeper.fileChanged().catch(report), ending.signal);
  const keeper = new SessionKeeper({
    copy: await WorkingCopy.begin(folder.work),
    recent: await RecentSessions.read(folder.recent),
    known: await KnownRecordings.read(folder.known),
    files,
    changed: (another) => changed(another),
    now,
  });
  const pool = new TrackerPool(Math.max(1, Math.ceil(cores / 2)));
  // What the user waits for right now must not queue behind whole segments.
  const quickPool = new TrackerPool(1);
  const fits = new Calculator();
  // Its own thread: a fit that the user waits for must not queue behind a reduction.
  const reductions = new Calculator();
  const measuring = new Measuring({
    tools,
    pool,
    fits,
    reductions,
    store: new MeasuredStore(cache),
    cores: Math.max(1, cores),
    changed: () => broadcast('results', measuring.state()),
    report,
  });
  const tokens = new Tokens();
  const downloads = options.browser ? new Downloads(now_ms) : null;
  const jobs = new Jobs(report);

  function changed(another: boolean): void {
    broadcast('document', keeper.state());
    options.shell?.documentChanged(unsaved());
    const { document, revision } = keeper;
    const source = document?.file() ?? null;
    const task = source && {
      revision,
      document: document as object,
      file: source,
      inputs: sessionInputs(source.session, (id) => keeper.fileOf(id)),
    };
    measuring.update(task, another).catch(report);
  }
  function unsaved() {
    const { document } = keeper;
    return { dirty: document?.dirty ?? false, name: document?.name ?? '', hasPlace: document?.place != null };
  }

  const parts: Parts = {
    options: { ...options, now, now_ms },
    keeper,
    measuring,
    fits,
    pool,
    quickPool,
    tools,
    tokens,
    saving: new Saving(tokens, downloads),
    layout: new LayoutFile(folder.layout),
    jobs,
    pictures: new Pictures(),
    overviews: new Overviews(cache),
    broadcast,
  };
  const handlers: Handlers = {
    ...documentCalls(parts),
    ...savingCalls(parts),
    ...shellCalls(parts),
    ...pictureCalls(parts),
    ...fitCalls(parts),
  };

  let closing: Promise<void> | null = null;
  const close = (discard = false) => {
    closing ??= (async () => {
      ending.abort();
      await jobs.cancelAll();
      await measuring.close();
      await Promise.all([fits.close(), reductions.close(), pool.close(), quickPool.close()]);
      await keeper.end(!discard);
    })();
    return closing;
  };
  try {
    if (file !== null) await keeper.openPath(file, false);
    else await restoreNewest(folder, keeper);
  } catch (error) {
    await close();
    throw error;
  }
  void cache.trim().catch(report);
  void removeOldUploads(folder, keeper.document?.paths ?? new Map()).catch(report);

  return {
    connect(transport) {
      const window = serveWindow(transport, handlers, report);
      windows.add(window);
      window.gone.addEventListener('abort', () => windows.delete(window), { once: true });
    },
    openPath: async (path) => void (await keeper.openPath(path, false)),
    requestOpen: (path) => broadcast('openRequest', tokens.add(path, 'read')),
    command: (id) => broadcast('command', { id }),
    addToken: (path, use, name) => tokens.add(path, use, name),
    downloads,
    folder,
    unsaved,
    save: (path) => {
      const place = path ?? keeper.need().place?.path;
      if (place === undefined) throw new InputError('This session has no file yet: say where to save it.');
      return keeper.saveTo(place);
    },
    close,
    [Symbol.asyncDispose]: () => close(),
  };
}

async function restoreNewest(folder: UserFolder, keeper: SessionKeeper): Promise<void> {
  for (const left of await leftBehind(folder.work)) {
    const release = await claim(folder.work, left.id);
    if (!release) continue;
    await keeper.begin(left.start);
    await release();
    return;
  }
}
