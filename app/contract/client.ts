import type { Args, CallName, HostEvents, Result } from '../contract.ts';
import { calls, events } from '../contract.ts';
import type { ErrorReason, HostError, Transport } from './transport.ts';

/** A call that was refused or failed, as the window catches it; `message` may be shown as it is. */
export class CallError extends Error {
  override readonly name = 'CallError';
  readonly reason: ErrorReason;
  constructor({ reason, message }: HostError) {
    super(message);
    this.reason = reason;
  }
}

/** The window's end of a transport. */
export interface HostClient {
  /** @throws CallError, also when the host goes away or `signal` aborts (reason `cancelled`). */
  call<K extends CallName>(name: K, args: Args<K>, signal?: AbortSignal): Promise<Result<K>>;
  /** Returns the function that ends the subscription. */
  on<K extends keyof HostEvents>(name: K, listener: (value: HostEvents[K]) => void): () => void;
  onClose(listener: () => void): void;
  close(): void;
}

interface Waiting {
  readonly name: CallName;
  resolve(value: unknown): void;
  reject(error: Error): void;
}

/** Speaks the contract over a transport: numbers calls, matches answers, checks what arrives, passes events on. */
export function connectHost(transport: Transport): HostClient {
  const waiting = new Map<number, Waiting>();
  const listeners = new Map<string, Set<(value: never) => void>>();
  let nextId = 1;
  let closed = false;

  transport.onMessage((message) => {
    if (typeof message !== 'object' || message === null || !('kind' in message)) return;
    const m = message as Record<string, unknown>;
    if (m.kind === 'event') return deliver(String(m.name), m.value);
    if (m.kind !== 'answer') return;
    const call = waiting.get(m.id as number);
    if (!call) return;
    waiting.delete(m.id as number);
    if (m.ok !== true) return call.reject(new CallError(m.error as HostError));
    const parsed = calls[call.name].result.safeParse(m.value);
    if (parsed.success) call.resolve(parsed.data);
    else
      call.reject(new CallError({ reason: 'internal', message: `The host's answer to ${call.name} makes no sense.` }));
  });

  transport.onClose(() => {
    closed = true;
    for (const call of waiting.values()) call.reject(gone());
    waiting.clear();
  });

  function deliver(name: string, value: unknown): void {
    if (!Object.hasOwn(events, name)) return;
    const parsed = events[name as keyof HostEvents].safeParse(value);
    if (!parsed.success) return;
    for (const listener of [...(listeners.get(name) ?? [])]) listener(parsed.data as never);
  }

  return {
    call(name, args, signal) {
      if (closed) return Promise.reject(gone());
      if (signal?.aborted) return Promise.reject(cancelled());
      const id = nextId++;
      return new Promise((resolve, reject) => {
        const abort = () => {
          if (!waiting.delete(id)) return;
          transport.send({ kind: 'abort', id });
          reject(cancelled());
        };
        const done = () => signal?.removeEventListener('abort', abort);
        waiting.set(id, {
          name,
          resolve: (value) => {
            done();
            resolve(value as Result<typeof name>);
          },
          reject: (error) => {
            done();
            reject(error);
          },
        });
        signal?.addEventListener('abort', abort, { once: true });
        transport.send({ kind: 'call', id, name, args });
      });
    },
    on(name, listener) {
      const set = listeners.get(name) ?? new Set();
      listeners.set(name, set);
      set.add(listener as (value: never) => void);
      return () => set.delete(listener as (value: never) => void);
    },
    onClose: (listener) => transport.onClose(listener),
    close: () => transport.close(),
  };
}

const gone = () => new CallError({ reason: 'closed', message: 'The measuring part of the program has ended.' });
const cancelled = () => new CallError({ reason: 'cancelled', message: 'Stopped.' });
