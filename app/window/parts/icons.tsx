const paths = {
  play: 'M4.500 2.800 13 8l-8.500 5.200Z',
  pause: 'M4.500 3v10M11.500 3v10',
  back: 'M11 3 5.500 8 11 13M4 3v10',
  forward: 'M5 3l5.500 5L5 13M12 3v10',
  plus: 'M8 3v10M3 8h10',
  minus: 'M3 8h10',
  whole: 'M2.500 6V2.500H6M10 2.500h3.500V6M13.500 10v3.500H10M6 13.500H2.500V10',
  left: 'M10 3 5 8l5 5',
  right: 'M6 3l5 5-5 5',
  close: 'M4 4l8 8M12 4l-8 8',
  region: 'M2.500 4.500h11v7h-11zM5 8h6',
  lens: 'M7 2.500a4.500 4.500 0 1 1 0 9 4.500 4.500 0 0 1 0-9ZM10.300 10.300 14 14',
} as const;

export type IconName = keyof typeof paths;

/** A small line drawing; what it means is said by the control around it. */
export function Icon({ name }: { name: IconName }) {
  return (
    <svg class="icon" viewBox="0 0 16 16" width="16" height="16" aria-hidden="true" focusable="false">
      <path d={paths[name]} data-solid={name === 'play' || undefined} />
    </svg>
  );
}
