import { createHash, randomBytes } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { basename, dirname } from 'node:path';
import { checkAgainstRecordings, describeOpened, type OpenRecording } from '../../src/measuring/open-recordings.ts';
import { describeRecording } from '../../src/recording/describe-recording.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { readSession } from '../../src/session/read-session.ts';
import { writeWhole } from '../../src/session/write-session.ts';
import type { DocumentState, RecentSession, RecordingState, Session } from '../contract.ts';
import { bareSentence } from './bare-sentence.ts';
import { fileKind } from './file-kind.ts';
import { findRecordings } from './find-recordings.ts';
import type { KnownRecordings, SeenRecording } from './known-recordings.ts';
import type { OpenFile, OpenFiles } from './open-files.ts';
import type { RecentSessions } from './recent-sessions.ts';
import { Refusal } from './serve-window.ts';
import { type DocumentStart, SessionDocument } from './session-document.ts';
import type { WorkingCopy } from './working-copy.ts';

/** What keeping the session needs from the outside. */
export interface KeeperKit {
  readonly copy: WorkingCopy;
  readonly recent: RecentSessions;
  readonly known: KnownRecordings;
  readonly files: OpenFiles;
  /** Told after every change. @param another a different document is open now. */
  readonly changed: (another: boolean) => void;
  /** Now, ISO 8601. */
  readonly now: () => string;
}

/** The document that is open: opening, editing, saving it, and its working copy on disk. */
export class SessionKeeper {
  readonly #kit: KeeperKit;
  #document: SessionDocument | null = null;
  #key = 'none';
  #revision = 0;

  constructor(kit: KeeperKit) {
    this.#kit = kit;
  }

  get document(): SessionDocument | null {
    return this.#document;
  }
  get revision(): number {
    return this.#revision;
  }

  /** The document, or a refusal that says there is none. */
  need(): SessionDocument {
    if (this.#document) return this.#document;
    throw new Refusal('bad_input', 'Nothing is open: open a recording or a session first.');
  }

  /** How a recording's file stands; null: the document has no such recording. */
  fileOf(recording: string): OpenFile | null {
    const path = this.#document?.paths.get(recording);
    return path === undefined ? null : this.#kit.files.now(path);
  }

  /** A recording that can be read, with the session's clock for it. Waits where it is being opened. */
  async opened(recording: string): Promise<OpenRecording> {
    const document = this.need();
    const path = document.paths.get(recording);
    if (path === undefined) throw new Refusal('bad_input', `There is no recording ${recording} in this session.`);
    const file = await this.#kit.files.when(path);
    const entry = document.session.recordings.find((r) => r.id === recording);
    if (file.state === 'ready' && entry) return describeOpened(entry, file.recording, file.content);
    if (file.state === 'unusable') throw new InputError(bareSentence(file.problem));
    throw new InputError(`${basename(path)}: the recording is missing; say where it is.`);
  }

  /** Opens a session or a recording. @param add a recording joins the session that is open. */
  async openPath(path: string, add: boolean): Promise<'session' | 'recording'> {
    const kind = await fileKind(path);
    if (kind === 'session') {
      if (add) throw new InputError(`${basename(path)}: this is a session file; a recording was expected.`);
      await this.#openSession(path);
      return kind;
    }
    const file = await this.#freshFile(path);
    if (file.state === 'unusable') throw new InputError(bareSentence(file.problem));
    if (file.state !== 'ready') throw new InputError(`${basename(path)}: there is no such file.`);
    if (add && this.#document) {
      this.#document.addRecording(path);
      await this.#changed(false);
    } else {
      const name = basename(path);
      const session: Session = {
        format: 'needlebeat/session',
        version: 1,
        title: name.replace(/\.[^.]*$/, ''),
        recordings: [{ id: 'A', file: name }],
        views: [],
        segments: [],
      };
      await this.begin({ session, paths: new Map([['A', path]]), place: null });
    }
    return kind;
  }

  /** Opens a session that comes with the program: it has no place of its own to be saved in. */
  async openTemplate(path: string): Promise<void> {
    const file = await readSession(path);
    await this.begin({ session: file.session, paths: await findRecordings(file, () => null), place: null });
  }

  async #openSession(path: string): Promise<void> {
    const file = await readSession(path);
    const paths = await findRecordings(file, (id) => this.#kit.known.seen(file.sha256, id));
    const asWritten = new Map(file.session.recordings.map((r) => [r.id, r.file]));
    const place = { path: file.path, sha256: file.sha256, asWritten };
    await this.begin({ session: file.session, paths, place });
    await this.#kit.recent.add(file.path, file.session.title ?? '', this.#kit.now());
  }

  /** Makes a document the one that is open. */
  async begin(start: DocumentStart | null): Promise<void> {
    this.#document = start && new SessionDocument(start);
    this.#key = randomBytes(6).toString('hex');
    for (const path of start?.paths.values() ?? []) this.#kit.files.now(path);
    await this.#changed(true);
  }

  /** Replaces the session. @param base the revision it was made from. */
  async edit(session: Session, base: number, label: string, merge: string | null): Promise<void> {
    if (base !== this.#revision) {
      throw new Refusal('stale_revision', 'The session has changed since; this edit was not made.');
    }
    const document = this.need();
    checkAgainstRecordings(session, this.#readyOnes(session), document.name);
    document.edit(session, label, merge);
    await this.#changed(false);
  }

  async undo(): Promise<void> {
    if (this.need().undo()) await this.#changed(false);
  }
  async redo(): Promise<void> {
    if (this.need().redo()) await this.#changed(false);
  }

  /** Gives a recording its file, if its content is right or unknown, or in any case. */
  async locate(recording: string, path: string, evenIfDifferent: boolean): Promise<'same' | 'unknown' | 'different'> {
    const document = this.need();
    if (!document.session.recordings.some((r) => r.id === recording)) {
      throw new Refusal('bad_input', `There is no recording ${recording} in this session.`);
    }
    const file = await this.#freshFile(path);
    if (file.state === 'unusable') throw new InputError(bareSentence(file.problem));
    if (file.state !== 'ready') throw new InputError(`${basename(path)}: there is no such file.`);
    const seen = document.place && this.#kit.known.seen(document.place.sha256, recording);
    const recognised = !seen ? 'unknown' : seen.content === file.content ? 'same' : 'different';
    if (recognised === 'different' && !evenIfDifferent) return recognised;
    document.locate(recording, path);
    await this.#changed(false);
    return recognised;
  }

  /** Writes the session file. @throws Refusal where another program changed it since, and it isn't a new place. */
  async saveTo(path: string): Promise<void> {
    const document = this.need();
    if (document.place?.path === path) await refuseIfChanged(path, document.place.sha256);
    const { session, text, sha256 } = document.textFor(dirname(path));
    await writeWhole(path, text).catch((error: NodeJS.ErrnoException) => {
      throw new InputError(`${basename(path)}: it can't be written here (${error.code ?? 'unknown reason'}).`);
    });
    document.savedAt(path, session, sha256);
    await this.#changed(false);
    await this.#kit.recent.add(path, session.title ?? '', this.#kit.now());
  }

  /** The session file for handing out. @param saved counts as saved. */
  async handOut(saved: boolean): Promise<{ name: string; text: string }> {
    const document = this.need();
    const { session, text, sha256 } = document.textFor(null);
    await this.#kit.known.remember(sha256, this.#seen(document));
    if (saved) {
      document.savedElsewhere(session);
      await this.#changed(false);
    }
    return { name: document.name, text };
  }

  /** Session files opened or saved last. */
  recentSessions(): Promise<RecentSession[]> {
    return this.#kit.recent.list();
  }

  /** Opens one of them. */
  async openRecent(id: string): Promise<void> {
    const path = this.#kit.recent.path(id);
    if (path === null) throw new Refusal('bad_input', 'This session is not in the list any more.');
    await this.#openSession(path);
  }

  /** Ends the run. @param keep leave work that no file holds for the next run to find. */
  async end(keep: boolean): Promise<void> {
    await this.#kit.copy.end(keep && (this.#document?.dirty ?? false));
  }

  /** A recording's file has been opened, or couldn't be. */
  async fileChanged(): Promise<void> {
    this.#kit.changed(false);
    const document = this.#document;
    if (document?.place) await this.#kit.known.remember(document.place.sha256, this.#seen(document));
  }

  /** What the window is shown. */
  state(): DocumentState {
    const document = this.#document;
    return {
      key: this.#key,
      session: document?.session ?? null,
      revision: this.#revision,
      canUndo: document !== null && document.undoLabel !== null,
      undoLabel: document?.undoLabel ?? null,
      canRedo: document !== null && document.redoLabel !== null,
      redoLabel: document?.redoLabel ?? null,
      dirty: document?.dirty ?? false,
      fileName: document?.place ? basename(document.place.path) : null,
      restored: document?.restored ?? false,
      recordings: document?.session.recordings.map((r) => this.#recordingState(r.id)) ?? [],
    };
  }

  /** Settles when the working copy is safely on disk. */
  async #changed(another: boolean): Promise<void> {
    this.#revision += 1;
    const safe = this.#kit.copy.save(this.#document);
    this.#kit.changed(another);
    await safe;
    const document = this.#document;
    if (document?.place && !document.dirty) {
      await this.#kit.known.remember(document.place.sha256, this.#seen(document));
    }
  }

  /** Opens a file anew: it may have changed since it was looked at. */
  #freshFile(path: string): Promise<OpenFile> {
    const used = [...(this.#document?.paths.values() ?? [])].includes(path);
    if (!used || this.#kit.files.now(path).state !== 'ready') this.#kit.files.forget(path);
    return this.#kit.files.when(path);
  }

  #readyOnes(session: Session): Map<string, OpenRecording> {
    const ready = new Map<string, OpenRecording>();
    for (const entry of session.recordings) {
      const file = this.fileOf(entry.id);
      if (file?.state === 'ready') ready.set(entry.id, describeOpened(entry, file.recording, file.content));
    }
    return ready;
  }

  #seen(document: SessionDocument): Record<string, SeenRecording> {
    const seen: Record<string, SeenRecording> = {};
    for (const { id } of document.session.recordings) {
      const path = document.paths.get(id);
      const file = path === undefined ? null : this.#kit.files.now(path);
      if (path !== undefined && file?.state === 'ready') {
        seen[id] = { path, content: file.content, bytes: file.recording.bytes };
      }
    }
    return seen;
  }

  #recordingState(id: string): RecordingState {
    const path = this.#document?.paths.get(id) ?? null;
    const file: OpenFile = path === null ? { state: 'missing' } : this.#kit.files.now(path);
    const name = path === null ? id : basename(path);
    const facts = file.state === 'ready' ? { ...describeRecording(file.recording), file: name } : null;
    const problem = file.state === 'unusable' ? bareSentence(file.problem) : null;
    return { id, name, state: file.state, problem, facts };
  }
}

async function refuseIfChanged(path: string, sha256: string): Promise<void> {
  const bytes = await readFile(path).catch(() => null);
  if (bytes === null || createHash('sha256').update(bytes).digest('hex') === sha256) return;
  throw new InputError(
    `${basename(path)}: another program has changed this file since it was opened; save under another name.`,
  );
}
