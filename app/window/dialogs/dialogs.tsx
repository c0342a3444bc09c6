import { dialog } from '../state/dialogs.ts';
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
