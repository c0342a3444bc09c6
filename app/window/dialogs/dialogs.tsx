import type { ComponentChildren } from 'preact';
import { useEffect, useRef } from 'preact/hooks';
import { closeDialog, dialog } from '../state/dialogs.ts';
import { AboutBox } from './about-box.tsx';
import { QuestionBox } from './question-box.tsx';
import { ShortcutList } from './shortcut-list.tsx';
import { TextBox } from './text-box.tsx';

/** The dialog that is open, if any. */
export function Dialogs() {
  const open = dialog.value;
  if (!open) return null;
  switch (open.kind) {
    case 'question':
      return <QuestionBox question={open} />;
    case 'text':
      return <TextBox request={open} />;
    case 'about':
      return <AboutBox />;
    case 'shortcuts':
      return <ShortcutList />;
    default:
      return open satisfies never;
  }
}

/** The frame of a dialog: keeps the keyboard inside, Escape puts it away, focus goes back to where it was. */
export function DialogFrame({
  title,
  children,
  wide = false,
}: {
  title: string;
  children: ComponentChildren;
  wide?: boolean;
}) {
  const element = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    const before = document.activeElement as HTMLElement | null;
    element.current?.showModal();
    return () => before?.focus?.();
  }, []);
  return (
    <dialog
      ref={element}
      class={wide ? 'wide' : ''}
      aria-label={title}
      onCancel={(event) => {
        event.preventDefault();
        closeDialog();
      }}
      onKeyDown={(event) => event.stopPropagation()}
    >
      <h2>{title}</h2>
      {children}
    </dialog>
  );
}
