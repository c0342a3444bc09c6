import { InputError } from '../../src/recording/input-error.ts';
import { firstIssue } from '../../src/session/issue-sentence.ts';
import {
  type Args,
  type CallName,
  calls,
  type HostError,
  type HostEvents,
  type Result,
  type Transport,
} from '../contract.ts';
import { bareSentence } from './bare-sentence.ts';

/** What a handler knows of the call besides its arguments. */
export interface CallContext {
  /** Aborts when the window takes the call back or goes away. */
  readonly signal: AbortSignal;
  /** The window that called. */
  readonly window: WindowLink;
}

/** One connected window. */
export interface WindowLink {
  send<K extends keyof HostEvents>(name: K, value: HostEvents[K]): void;
  /** Aborts when the window has gone. */
  readonly gone: AbortSignal;
}

/** A handler for every call of the contract. */
export type Handlers = {
  readonly [K in CallName]: (args: Args<K>, context: CallContext) => Result<K> | Promise<Result<K>>;
};

/** A failure that crosses to the window as it is. */
export class Refusal extends Error {
  override readonly name = 'Refusal';
  readonly reason: HostError['reason'];
  constructor(reason: HostError['reason'], message: string) {
    super(message);
    this.reason = reason;
  }
}

/**
 * Answers one window's calls: what isn't in the contract is refused, what doesn't parse never reaches a handler.
 * @param report is told of mistakes of the program, which the window only hears of in general words.
 */
export function serveWindow(transport: Transport, handlers: Handlers, report: (error: unknown) => void): WindowLink {
  const gone = new AbortController();
  const running = new Map<number, AbortController>();
  const window: WindowLink = {
    send: (name, value) => transport.send({ kind: 'event', name, value }),
    gone: gone.signal,
  };
  transport.onClose(() => {
    gone.abort();
    for (const call of running.values()) call.abort();
  });
  transport.onMessage((message) => {
    if (!isNumbered(message)) return;
    if (message.kind === 'abort') running.get(message.id)?.abort();
    else if (message.kind === 'call' && !running.has(message.id)) void answer(message);
  });

  async function answer({ id, name, args }: Numbered): Promise<void> {
    const abort = new AbortController();
    running.set(id, abort);
    try {
      const value = await handle(handlers, name, args, { signal: abort.signal, window });
      transport.send({ kind: 'answer', id, ok: true, value });
    } catch (error) {
      const seen = abort.signal.aborted ? cancelled : hostError(error);
      if (seen.reason === 'internal') report(error);
      transport.send({ kind: 'answer', id, ok: false, error: seen });
    } finally {
      running.delete(id);
    }
  }
  return window;
}

async function handle(handlers: Handlers, name: unknown, args: unknown, context: CallContext): Promise<unknown> {
  if (typeof name !== 'string' || !Object.hasOwn(calls, name)) {
    throw new Refusal('unknown_call', 'There is no such call.');
  }
  const call = name as CallName;
  const parsed = calls[call].args.safeParse(args);
  if (!parsed.success) throw new Refusal('bad_argument', `${call}: ${firstIssue(parsed.error, args)}`);
  const handler = handlers[call] as (args: unknown, context: CallContext) => unknown;
  return handler(parsed.data, context);
}

const cancelled: HostError = { reason: 'cancelled', message: 'Stopped.' };

/** What the window may know of a failure. */
export function hostError(error: unknown): HostError {
  if (error instanceof Refusal) return { reason: error.reason, message: error.message };
  if (error instanceof InputError) return { reason: 'bad_input', message: bareSentence(error.message) };
  if (error instanceof Error && error.name === 'AbortError') return cancelled;
  return { reason: 'internal', message: 'Something went wrong inside the program; the session is safe.' };
}

interface Numbered {
  readonly kind: unknown;
  readonly id: number;
  readonly name?: unknown;
  readonly args?: unknown;
}

function isNumbered(message: unknown): message is Numbered {
  return (
    typeof message === 'object' &&
    message !== null &&
    'kind' in message &&
    'id' in message &&
    Number.isSafeInteger(message.id)
  );
}
