import type { CommandState } from '../contract.ts';

/** What a desktop shell does for the host: it has the native dialogs and the native menu. Paths stay between the two. */
export interface Shell {
  /** @returns absolute path, null: the user thought better of it. */
  chooseFile(purpose: 'open' | 'recording'): Promise<string | null>;
  choosePlace(suggestedName: string): Promise<string | null>;
  chooseFolder(): Promise<string | null>;
  /** Prints a page without scripts to PDF. @returns the file's bytes. @throws Error with the sentence for the user. */
  printPdf(html: string): Promise<Uint8Array>;
  menuState(menu: {
    readonly state: CommandState;
    readonly undoLabel: string | null;
    readonly redoLabel: string | null;
  }): void;
  /** The document changed: for the window's title and the question about unsaved work. */
  documentChanged(facts: { readonly dirty: boolean; readonly name: string; readonly hasPlace: boolean }): void;
}
