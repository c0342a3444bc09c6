import { closeDialog, type Question } from '../state/dialogs.ts';
import { DialogFrame } from './dialog-frame.tsx';

/** A question with its answers as buttons. */
export function QuestionBox({ question }: { question: Question }) {
  return (
    <DialogFrame title={question.title}>
      <p>{question.text}</p>
      <div class="dialog-buttons">
        {question.answers.map((answer, i) => (
          <button key={answer} type="button" class={i === 0 ? 'primary' : ''} onClick={() => closeDialog(answer)}>
            {answer}
          </button>
        ))}
      </div>
    </DialogFrame>
  );
}
