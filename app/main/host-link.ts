import { type MessagePortMain, type UtilityProcess, utilityProcess } from 'electron';
import type { FileToken } from '../contract.ts';
import type { DialogWish, DocumentFacts, FromHost, HostStart, ToHost } from './host-messages.ts';
import type { MenuFacts } from './menu-template.ts';

/** Who hears of the host process. */
export interface HostListener {
  readonly started: (problem: string | null) => void;
  readonly document: (facts: DocumentFacts) => void;
  readonly menu: (facts: MenuFacts) => void;
  /** Shows a native dialog. */
  readonly dialog: (wish: DialogWish) => Promise<string | null>;
  /** Prints a page to PDF. */
  readonly print: (html: unknown) => Promise<Uint8Array>;
  /** The process has ended without being asked to. */
  readonly died: (code: number) => void;
}

interface Asked {
  resolve(reply: { token: FileToken | null; problem: string | null }): void;
}

/** The host process, seen from the shell. */
export class HostLink {
  readonly #process: UtilityProcess;
  readonly #asked = new Map<number, Asked>();
  readonly #listener: HostListener;
  #next = 1;
  #ending = false;
  #alive = true;

  /** @param entry absolute path of the process's module. */
  constructor(entry: string, start: HostStart, listener: HostListener) {
    this.#listener = listener;
    this.#process = utilityProcess.fork(entry, [], { serviceName: 'Needlebeat host', stdio: 'inherit' });
    this.#process.on('message', (message: FromHost) => this.#receive(message));
    this.#process.once('exit', (code) => this.#exited(code));
    this.#post(start);
  }

  /** Gives a window its way to the host. */
  connect(port: MessagePortMain): void {
    this.#post({ kind: 'window' }, [port]);
  }
  requestOpen(path: string): void {
    this.#post({ kind: 'requestOpen', path });
  }
  command(id: Extract<ToHost, { kind: 'command' }>['id']): void {
    this.#post({ kind: 'command', id });
  }

  /** Token of a file for the window. @throws Error with the sentence for the user. */
  async token(path: string): Promise<FileToken> {
    const { token, problem } = await this.#ask((number) => ({ kind: 'token', number, path }));
    if (token) return token;
    throw new Error(problem ?? 'The file could not be handed over.');
  }

  /** Saves the session. @param path null: in its place. @returns the sentence that says why not, null where it went well. */
  async save(path: string | null): Promise<string | null> {
    return (await this.#ask((number) => ({ kind: 'save', number, path }))).problem;
  }

  /** Ends the process; settles when it has gone. */
  async close(discard: boolean): Promise<void> {
    if (this.#ending) return;
    this.#ending = true;
    if (!this.#alive) return;
    const gone = new Promise<void>((resolve) => this.#process.once('exit', () => resolve()));
    this.#post({ kind: 'close', number: this.#next++, discard });
    const late = setTimeout(() => this.#process.kill(), 10_000);
    await gone;
    clearTimeout(late);
  }

  #ask(make: (number: number) => ToHost): Promise<{ token: FileToken | null; problem: string | null }> {
    if (!this.#alive) return Promise.resolve({ token: null, problem: 'The measuring part of the program has ended.' });
    const number = this.#next++;
    return new Promise((resolve) => {
      this.#asked.set(number, { resolve });
      this.#post(make(number));
    });
  }

  #post(message: ToHost, ports: MessagePortMain[] = []): void {
    if (this.#alive) this.#process.postMessage(message, ports);
  }

  #receive(message: FromHost): void {
    switch (message.kind) {
      case 'started':
        this.#listener.started(message.problem);
        break;
      case 'document':
        this.#listener.document(message.facts);
        break;
      case 'menu':
        this.#listener.menu(message.facts);
        break;
      case 'dialog':
        void this.#answer(message.number, message.wish);
        break;
      case 'print':
        void this.#print(message.number, message.html);
        break;
      case 'reply':
        this.#asked.get(message.number)?.resolve(message);
        this.#asked.delete(message.number);
        break;
      default:
        message satisfies never;
    }
  }

  async #answer(number: number, wish: DialogWish): Promise<void> {
    const path = await this.#listener.dialog(wish).catch(() => null);
    this.#post({ kind: 'chosen', number, path });
  }

  async #print(number: number, html: unknown): Promise<void> {
    const pdf = await this.#listener.print(html).catch(() => null);
    this.#post({ kind: 'printed', number, pdf });
  }

  #exited(code: number): void {
    this.#alive = false;
    const problem = 'The measuring part of the program has ended.';
    for (const asked of this.#asked.values()) asked.resolve({ token: null, problem });
    this.#asked.clear();
    if (!this.#ending) this.#listener.died(code);
  }
}
