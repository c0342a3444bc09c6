import { signal } from '@preact/signals';

/** A question that the user has to answer before the program goes on. */
export interface Question {
  readonly kind: 'question';
  readonly title: string;
  readonly text: string;
  /** The first is what Enter does; the answer is the name of the button, null: put away. */
  readonly answers: readonly string[];
  readonly resolve: (answer: string | null) => void;
}

/** A request for one line of text. */
export interface TextRequest {
  readonly kind: 'text';
  readonly title: string;
  readonly label: string;
  readonly text: string;
  readonly action: string;
  readonly resolve: (text: string | null) => void;
}

export type Dialog = Question | TextRequest | { readonly kind: 'about' } | { readonly kind: 'shortcuts' };

/** The dialog that is open; null: none. */
export const dialog = signal<Dialog | null>(null);

/** Puts a question; the promise gives the chosen answer, null where the user put it away. */
export function askUser(question: { title: string; text: string; answers: readonly string[] }): Promise<string | null> {
  return new Promise((resolve) => {
    dialog.value = { kind: 'question', ...question, resolve };
  });
}

/** Asks for one line of text; null where the user put it away. */
export function askText(request: {
  title: string;
  label: string;
  text: string;
  action: string;
}): Promise<string | null> {
  return new Promise((resolve) => {
    dialog.value = { kind: 'text', ...request, resolve };
  });
}

/** Closes the dialog; a question that is open is answered with `answer`. */
export function closeDialog(answer: string | null = null): void {
  const open = dialog.value;
  dialog.value = null;
  if (open?.kind === 'question' || open?.kind === 'text') open.resolve(answer);
}
