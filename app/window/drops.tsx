import { useSignal } from '@preact/signals';
import { useEffect } from 'preact/hooks';
import { openFiles } from './state/files.ts';

/** The whole window takes files that are dropped on it. */
export function Drops() {
  const over = useSignal(false);
  useEffect(() => {
    let leaving: ReturnType<typeof setTimeout> | undefined;
    const stay = (event: DragEvent) => {
      event.preventDefault();
      clearTimeout(leaving);
      over.value = event.dataTransfer?.types.includes('Files') ?? false;
    };
    const leave = () => {
      leaving = setTimeout(() => {
        over.value = false;
      }, 80);
    };
    const drop = (event: DragEvent) => {
      event.preventDefault();
      over.value = false;
      void openFiles([...(event.dataTransfer?.files ?? [])]);
    };
    window.addEventListener('dragover', stay);
    window.addEventListener('dragleave', leave);
    window.addEventListener('drop', drop);
    return () => {
      window.removeEventListener('dragover', stay);
      window.removeEventListener('dragleave', leave);
      window.removeEventListener('drop', drop);
    };
  }, []);
  return over.value ? (
    <div class="drop-veil" aria-hidden="true">
      Let go to open the recording or session
    </div>
  ) : null;
}
