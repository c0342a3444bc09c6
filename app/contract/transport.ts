/** Why a call was refused or failed; `message` is one plain sentence for the user and never a stack. */
export interface HostError {
  readonly reason: ErrorReason;
  readonly message: string;
}

/**
 * - `unknown_call`, `bad_argument`: the call or its arguments aren't in the contract;
 * - `bad_input`: a file, field or segment of the user's can't be used, and the message says why;
 * - `stale_revision`: the edit was made on a session that has changed since; read the document again;
 * - `cancelled`: ended because it was asked to; nothing to show;
 * - `closed`: the host has gone;
 * - `internal`: a mistake of the program.
 */
export type ErrorReason =
  | 'unknown_call'
  | 'bad_argument'
  | 'bad_input'
  | 'stale_revision'
  | 'cancelled'
  | 'closed'
  | 'internal';

/** What the window sends. An `abort` names a call that needn't be answered any more; it is answered `cancelled`. */
export type WindowMessage =
  | { readonly kind: 'call'; readonly id: number; readonly name: string; readonly args: unknown }
  | { readonly kind: 'abort'; readonly id: number };

/** What the host sends: one answer for each call, and events whenever it likes. */
export type HostMessage =
  | { readonly kind: 'answer'; readonly id: number; readonly ok: true; readonly value: unknown }
  | { readonly kind: 'answer'; readonly id: number; readonly ok: false; readonly error: HostError }
  | { readonly kind: 'event'; readonly name: string; readonly value: unknown };

/**
 * What calls and events travel on. Messages are plain data and may hold Uint8Array, Int32Array and Float64Array.
 * Messages that arrive before `onMessage` was called are kept for it.
 */
export interface Transport {
  send(message: WindowMessage | HostMessage): void;
  onMessage(listener: (message: unknown) => void): void;
  /** Called once when the other side has gone or `close` was called. */
  onClose(listener: () => void): void;
  close(): void;
}
