import { boardShare, setShare, sheetShare } from './state/layout.ts';

/** The edge between the picture and the sheet, or above the time board: dragged, or moved with the arrow keys. */
export function Splitter({ way }: { way: 'sheet' | 'board' }) {
  const share = way === 'sheet' ? sheetShare.value : boardShare.value;
  return (
    // biome-ignore lint/a11y/useSemanticElements: an hr is a line between texts, this one is moved.
    <div
      class="splitter"
      data-way={way}
      role="separator"
      tabIndex={0}
      aria-label={way === 'sheet' ? 'Width of the sheet' : 'Height of the time board'}
      aria-orientation={way === 'sheet' ? 'vertical' : 'horizontal'}
      aria-valuenow={Math.round(share * 100)}
      aria-valuemin={20}
      aria-valuemax={75}
      onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
      onPointerMove={(event) => {
        if (!event.currentTarget.hasPointerCapture(event.pointerId)) return;
        const box = event.currentTarget.parentElement?.getBoundingClientRect();
        if (!box) return;
        setShare(
          way,
          way === 'sheet' ? (box.right - event.clientX) / box.width : (box.bottom - event.clientY) / box.height,
        );
      }}
      onKeyDown={(event) => {
        const keys = way === 'sheet' ? ['ArrowLeft', 'ArrowRight'] : ['ArrowUp', 'ArrowDown'];
        const step = event.key === keys[0] ? 0.02 : event.key === keys[1] ? -0.02 : 0;
        if (step === 0) return;
        event.preventDefault();
        setShare(way, share + step);
      }}
    />
  );
}
