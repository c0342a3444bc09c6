import { useRef } from 'preact/hooks';
import { closeDialog, type TextRequest } from '../state/dialogs.ts';
import { DialogFrame } from './dialog-frame.tsx';

/** Asks for one line of text. */
export function TextBox({ request }: { request: TextRequest }) {
  const field = useRef<HTMLInputElement>(null);
  return (
    <DialogFrame title={request.title}>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          closeDialog(field.current?.value ?? '');
        }}
      >
        <label class="stacked">
          {request.label}
          <input
            ref={field}
            type="text"
            class="text-field wide"
            defaultValue={request.text}
            maxLength={500}
            autofocus
          />
        </label>
        <div class="dialog-buttons">
          <button type="submit" class="primary">
            {request.action}
          </button>
          <button type="button" onClick={() => closeDialog()}>
            Cancel
          </button>
        </div>
      </form>
    </DialogFrame>
  );
}
