import { access } from 'node:fs/promises';
import { contentHash } from '../../src/recording/content-hash.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import { InputError } from '../../src/recording/input-error.ts';
import { openRecording } from '../../src/recording/open-recording.ts';
import type { Recording } from '../../src/recording/recording.ts';

/** A recording file as the host has it. */
export type OpenFile =
  | { readonly state: 'opening' }
  | { readonly state: 'ready'; readonly recording: Recording; readonly content: string }
  | { readonly state: 'missing' }
  | { readonly state: 'unusable'; readonly problem: string };

/** The recording files that were asked for, each opened once. */
export class OpenFiles {
  readonly #files = new Map<string, { file: OpenFile; done: Promise<OpenFile> }>();
  readonly #tools: () => Promise<FfmpegTools>;
  readonly #changed: (path: string) => void;
  readonly #signal: AbortSignal;

  /** @param changed is told when a file has been opened, or couldn't be. */
  constructor(tools: () => Promise<FfmpegTools>, changed: (path: string) => void, signal: AbortSignal) {
    this.#tools = tools;
    this.#changed = changed;
    this.#signal = signal;
  }

  /** How a file stands now; begins to open it where that wasn't tried yet. */
  now(path: string): OpenFile {
    return this.#entry(path).file;
  }

  /** A file when it has been opened, or couldn't be. */
  when(path: string): Promise<OpenFile> {
    return this.#entry(path).done;
  }

  /** Forgets a file, so that it is looked at afresh. */
  forget(path: string): void {
    this.#files.delete(path);
  }

  #entry(path: string): { file: OpenFile; done: Promise<OpenFile> } {
    const known = this.#files.get(path);
    if (known) return known;
    const entry = { file: { state: 'opening' } as OpenFile, done: this.#open(path) };
    this.#files.set(path, entry);
    void entry.done.then((file) => {
      entry.file = file;
      if (this.#files.get(path) === entry && !this.#signal.aborted) this.#changed(path);
    });
    return entry;
  }

  async #open(path: string): Promise<OpenFile> {
    try {
      const tools = await this.#tools();
      const recording = await openRecording(path, tools, this.#signal);
      return { state: 'ready', recording, content: await contentHash(path) };
    } catch (error) {
      if (await isMissing(path)) return { state: 'missing' };
      const problem = error instanceof InputError ? error.message : "It can't be read.";
      return { state: 'unusable', problem };
    }
  }
}

async function isMissing(path: string): Promise<boolean> {
  return access(path).then(
    () => false,
    (error: NodeJS.ErrnoException) => error.code === 'ENOENT' || error.code === 'ENOTDIR',
  );
}
