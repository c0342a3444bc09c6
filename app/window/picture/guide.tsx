import type { ComponentChildren } from 'preact';
import type { SessionView } from '../../contract.ts';
import { replaceView } from '../session-edits/view-edits.ts';
import { edit } from '../state/document.ts';

interface GuideProps {
  /** What it sets, as it is called in the view sheet and in what is undone. */
  readonly name: string;
  readonly unit: 'px' | '°';
  readonly value: number;
  readonly least: number;
  readonly most: number;
  /** The view with another value. */
  with(value: number): SessionView;
  readonly children: ComponentChildren;
}

const SPOKEN = { px: 'pixels', '°': 'degrees' } as const;

/** A mark over the picture that sets one number of the view: by dragging, or with the arrow keys once it has the keyboard. */
export function Guide({ name, unit, value, least, most, children, ...props }: GuideProps) {
  function nudge(event: KeyboardEvent): void {
    const up = event.key === 'ArrowRight' || event.key === 'ArrowUp';
    const down = event.key === 'ArrowLeft' || event.key === 'ArrowDown';
    if (!up && !down) return;
    event.preventDefault();
    const next = value + (up ? 1 : -1) * (event.shiftKey ? 10 : 1);
    const view = props.with(Math.min(Math.max(Math.round(next * 10) / 10, least), most));
    edit(name, (s) => replaceView(s, view), `guide ${name} ${view.id}`);
  }
  return (
    <g
      class="guide"
      tabindex={0}
      role="slider"
      aria-label={name}
      aria-valuemin={least}
      aria-valuemax={most}
      aria-valuenow={value}
      aria-valuetext={`${value} ${SPOKEN[unit]}`}
      data-guide={name}
      onKeyDown={nudge}
    >
      {children}
    </g>
  );
}

/** A line over the picture that is seen on any ground: light on dark. */
export function GuideLine({ d, dashed = false }: { d: string; dashed?: boolean }) {
  return (
    <>
      <path class="halo" d={d} />
      <path class="edge" d={d} stroke-dasharray={dashed ? '4 3' : undefined} />
    </>
  );
}
