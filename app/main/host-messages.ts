import type { CommandId, FileToken } from '../contract.ts';
import type { MenuFacts } from './menu-template.ts';

/** How the host process is started. */
export interface HostStart {
  readonly kind: 'start';
  readonly userFolder: string;
  readonly cores: number;
  readonly demo: string;
  readonly runtime: { readonly name: string; readonly version: string }[];
  /** To open, absolute; null: what the last run left behind. */
  readonly file: string | null;
}

/** What the host tells of the document. */
export interface DocumentFacts {
  readonly dirty: boolean;
  readonly name: string;
  readonly hasPlace: boolean;
}

/** A native dialog that the host wants shown. */
export type DialogWish =
  | { readonly dialog: 'file'; readonly purpose: 'open' | 'recording' }
  | { readonly dialog: 'place'; readonly suggestedName: string }
  | { readonly dialog: 'folder' };

/** From the shell to the host process. Those with a number are answered by `reply`. A `window` comes with a message port. */
export type ToHost =
  | HostStart
  | { readonly kind: 'window' }
  | { readonly kind: 'token'; readonly number: number; readonly path: string }
  | { readonly kind: 'requestOpen'; readonly path: string }
  | { readonly kind: 'command'; readonly id: CommandId }
  | { readonly kind: 'save'; readonly number: number; readonly path: string | null }
  | { readonly kind: 'close'; readonly number: number; readonly discard: boolean }
  | { readonly kind: 'chosen'; readonly number: number; readonly path: string | null }
  | { readonly kind: 'printed'; readonly number: number; readonly pdf: Uint8Array | null };

/** From the host process to the shell. A `dialog` is answered by `chosen`, a `print` by `printed`. */
export type FromHost =
  | { readonly kind: 'started'; readonly problem: string | null }
  | { readonly kind: 'document'; readonly facts: DocumentFacts }
  | { readonly kind: 'menu'; readonly facts: MenuFacts }
  | { readonly kind: 'dialog'; readonly number: number; readonly wish: DialogWish }
  | { readonly kind: 'print'; readonly number: number; readonly html: string }
  | {
      readonly kind: 'reply';
      readonly number: number;
      readonly token: FileToken | null;
      readonly problem: string | null;
    };
