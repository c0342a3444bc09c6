import { createHash } from 'node:crypto';
import { basename, dirname } from 'node:path';
import { InputError } from '../../src/recording/input-error.ts';
import { parseSession } from '../../src/session/read-session.ts';
import { sessionText } from '../../src/session/write-session.ts';
import type { Session } from '../contract.ts';
import { History } from './history.ts';
import { placed, withoutPaths } from './placed-session.ts';
import { Refusal } from './serve-window.ts';

/** The file of a session, as read or written last. */
export interface SessionPlace {
  /** Absolute. */
  readonly path: string;
  readonly sha256: string;
  /** How it spells the files of the recordings, by id. */
  readonly asWritten: ReadonlyMap<string, string>;
}

/** What a document begins with. */
export interface DocumentStart {
  readonly session: Session;
  readonly paths: ReadonlyMap<string, string>;
  readonly place: SessionPlace | null;
  /** The session as its file holds it; the session itself where left out. */
  readonly saved?: Session;
  readonly restored?: boolean;
}

/** The session that is open, with its history, its file and where its recordings are. Touches no disk. */
export class SessionDocument {
  readonly #history: History<Session>;
  readonly #paths: Map<string, string>;
  #place: SessionPlace | null;
  #savedText: string;
  #moved = false;
  readonly restored: boolean;

  constructor(start: DocumentStart) {
    const session = withoutPaths(start.session);
    this.#history = new History(session);
    this.#paths = new Map(start.paths);
    this.#place = start.place;
    this.#savedText = sessionText(withoutPaths(start.saved ?? session));
    this.restored = start.restored ?? false;
  }

  get session(): Session {
    return this.#history.state;
  }
  get paths(): ReadonlyMap<string, string> {
    return this.#paths;
  }
  get place(): SessionPlace | null {
    return this.#place;
  }
  get undoLabel(): string | null {
    return this.#history.undoLabel;
  }
  get redoLabel(): string | null {
    return this.#history.redoLabel;
  }
  get dirty(): boolean {
    return this.#moved || sessionText(this.session) !== this.#savedText;
  }
  /** What the session's file holds, as the window sees it. */
  get saved(): Session {
    return JSON.parse(this.#savedText) as Session;
  }
  /** Name for sentences and save dialogs. */
  get name(): string {
    if (this.#place) return basename(this.#place.path);
    const title = (this.session.title ?? '').replace(/[^\p{L}\p{N}._-]+/gu, ' ').trim();
    const recording = this.session.recordings[0]?.file.replace(/\.[^.]*$/, '');
    return `${(title || recording || 'session').slice(0, 80)}.needlebeat.json`;
  }

  /**
   * Replaces the session.
   * @throws InputError where its parts contradict each other; Refusal where it holds a recording that was never opened.
   */
  edit(next: Session, label: string, merge: string | null): void {
    const known = withKnownFiles(next, this.#paths, this.session);
    this.#history.push(checked(known, this.name), label, merge);
  }

  /** Adds a recording as a step that can be undone. @returns its id. */
  addRecording(path: string): string {
    const used = new Set([...this.#paths.keys(), ...this.session.recordings.map((r) => r.id)]);
    const id = freeId(used);
    this.#paths.set(id, path);
    const recordings = [...this.session.recordings, { id, file: basename(path) }];
    this.#history.push({ ...this.session, recordings }, 'Add a recording', null);
    return id;
  }

  undo(): boolean {
    return this.#history.undo();
  }
  redo(): boolean {
    return this.#history.redo();
  }

  /** Says where a recording is now: the session file that says something else is out of date. */
  locate(id: string, path: string): void {
    this.#moved ||= this.#place !== null && this.#paths.get(id) !== path;
    this.#paths.set(id, path);
  }

  /**
   * The session file as it would be written into a folder.
   * @param folder absolute, null: recordings are taken to lie beside it.
   */
  textFor(folder: string | null): { readonly session: Session; readonly text: string; readonly sha256: string } {
    const sameFolder = this.#place !== null && folder === dirname(this.#place.path);
    const session = placed(this.session, this.#paths, folder, sameFolder ? this.#place?.asWritten : undefined);
    const text = sessionText(session);
    return { session, text, sha256: sha256(text) };
  }

  /** The session file that results are results of: the one on disk where nothing has been changed since, else the one that would be saved. */
  file(): { readonly session: Session; readonly path: string; readonly sha256: string } {
    const folder = this.#place ? dirname(this.#place.path) : null;
    const { session, sha256 } = this.textFor(folder);
    const untouched = this.#place !== null && !this.dirty && this.#place.asWritten.size > 0;
    return {
      session,
      path: this.#place?.path ?? this.name,
      sha256: untouched && this.#place ? this.#place.sha256 : sha256,
    };
  }

  /** The session was written to its file. */
  savedAt(path: string, written: Session, hash: string): void {
    const asWritten = new Map(written.recordings.map((r) => [r.id, r.file]));
    this.#place = { path, sha256: hash, asWritten };
    this.savedElsewhere(written);
  }

  /** The session was handed out as a file whose place isn't known. */
  savedElsewhere(written: Session): void {
    this.#savedText = sessionText(withoutPaths(written));
    this.#moved = false;
  }
}

/** Hexadecimal SHA-256 of a text in UTF-8. */
export function sha256(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}

/** Letters first, as in the session file's example, then numbers. */
export function freeId(used: ReadonlySet<string>): string {
  for (const letter of 'ABCDEFGHIJKLMNOPQRSTUVWXYZ') if (!used.has(letter)) return letter;
  for (let n = 1; ; n++) if (!used.has(`R${n}`)) return `R${n}`;
}

/** The same checks as a session file's, in the same words. */
function checked(session: Session, name: string): Session {
  return parseSession(sessionText(session), name);
}

function withKnownFiles(next: Session, paths: ReadonlyMap<string, string>, before: Session): Session {
  const files = new Map(before.recordings.map((r) => [r.id, r.file]));
  const recordings = next.recordings.map((r) => {
    const path = paths.get(r.id);
    const file = path === undefined ? files.get(r.id) : basename(path);
    if (file === undefined) {
      throw new Refusal('bad_input', `Recording ${r.id} isn't part of this session: open its file first.`);
    }
    return { ...r, file };
  });
  if (recordings.length === 0) throw new InputError('A session needs at least one recording.');
  return { ...next, recordings };
}
