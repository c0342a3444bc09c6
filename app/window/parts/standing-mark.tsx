import type { Standing } from '../state/results.ts';

/** Words for how a segment stands. */
export const STANDING_WORDS: Readonly<Record<Standing, string>> = {
  measured: 'measured',
  doubtful: 'doubtful',
  unmeasured: 'unmeasured',
  'left-out': 'left out',
  waiting: 'being measured',
};

/** How a segment stands, as a shape of its own (colour only repeats it): disc, triangle, cross, ring, dots. */
export function StandingMark({ standing, named = false }: { standing: Standing; named?: boolean }) {
  return (
    <span class="standing" data-standing={standing}>
      <svg
        viewBox="0 0 12 12"
        width="12"
        height="12"
        role={named ? 'presentation' : 'img'}
        aria-label={STANDING_WORDS[standing]}
      >
        {shapeOf(standing)}
      </svg>
      {named ? <span>{STANDING_WORDS[standing]}</span> : null}
    </span>
  );
}

function shapeOf(standing: Standing) {
  switch (standing) {
    case 'measured':
      return <circle cx="6" cy="6" r="4" class="solid" />;
    case 'doubtful':
      return <path d="M6 1.500 11 10.500H1Z" class="solid" />;
    case 'unmeasured':
      return <path d="M2 2l8 8M10 2l-8 8" class="line" />;
    case 'left-out':
      return <circle cx="6" cy="6" r="3.750" class="line" />;
    case 'waiting':
      return (
        <g class="solid">
          <circle cx="2" cy="6" r="1.300" />
          <circle cx="6" cy="6" r="1.300" />
          <circle cx="10" cy="6" r="1.300" />
        </g>
      );
    default:
      return standing satisfies never;
  }
}
