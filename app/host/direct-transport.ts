import type { Transport } from '../contract.ts';

/** Two ends of a transport within one process; messages are cloned and arrive later, as on a real one. */
export function directTransport(): { readonly window: Transport; readonly host: Transport } {
  const window = new End();
  const host = new End();
  window.other = host;
  host.other = window;
  return { window, host };
}

class End implements Transport {
  other: End | null = null;
  readonly #waiting: unknown[] = [];
  #listener: ((message: unknown) => void) | null = null;
  readonly #closers: (() => void)[] = [];
  #closed = false;

  send(message: unknown): void {
    if (this.#closed) return;
    const copy = structuredClone(message);
    setImmediate(() => this.other?.take(copy));
  }
  onMessage(listener: (message: unknown) => void): void {
    this.#listener = listener;
    for (const message of this.#waiting.splice(0)) listener(message);
  }
  onClose(listener: () => void): void {
    this.#closers.push(listener);
  }
  close(): void {
    if (this.#closed) return;
    this.#closed = true;
    for (const closer of this.#closers) closer();
    this.other?.close();
  }
  take(message: unknown): void {
    if (this.#closed) return;
    if (this.#listener) this.#listener(message);
    else this.#waiting.push(message);
  }
}
