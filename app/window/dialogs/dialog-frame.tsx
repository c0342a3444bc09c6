import type { ComponentChildren } from 'preact';
import { useEffect, useRef } from 'preact/hooks';
import { closeDialog } from '../state/dialogs.ts';

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
