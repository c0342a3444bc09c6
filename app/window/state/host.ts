import { signal } from '@preact/signals';
import { CallError, type HostClient } from '../../contract/client.ts';
import type { Args, CallName, Result } from '../../contract.ts';
import { tellMistake } from './notices.ts';

let client: HostClient | null = null;

/** What the host said about itself. */
export const hello = signal<Result<'hello'> | null>(null);

/** True once the host has gone: nothing can be measured or saved any more. */
export const hostGone = signal(false);

/** Says which host the window talks to; called once, before anything is drawn. */
export function useHost(next: HostClient): void {
  client = next;
  next.onClose(() => {
    hostGone.value = true;
  });
}

/** The host. @throws Error before `useHost`. */
export function host(): HostClient {
  if (!client) throw new Error('no host yet');
  return client;
}

/** Calls the host; where it refuses, the user is told its sentence and the answer is null. A cancelled call says nothing. */
export async function ask<K extends CallName>(name: K, args: Args<K>): Promise<Result<K> | null> {
  try {
    return await host().call(name, args);
  } catch (error) {
    tellFailure(error);
    return null;
  }
}

/** Tells the user why something failed, unless it was cancelled or the host has gone (which is said elsewhere). */
export function tellFailure(error: unknown): void {
  if (error instanceof CallError && (error.reason === 'cancelled' || error.reason === 'closed')) return;
  tellMistake(error instanceof Error ? error.message : 'Something went wrong.');
}
