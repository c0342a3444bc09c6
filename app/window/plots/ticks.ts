/** Where an axis carries marks: `places` in the axis's unit and how many decimals their labels need. */
export interface Ticks {
  readonly places: readonly number[];
  readonly decimals: number;
}

const LARGEST_COUNT = 1000;

const TIME_STEPS_S = [
  0.001, 0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 15, 30, 60, 120, 300, 600, 900, 1800, 3600, 7200,
];

/** Marks on a time axis in seconds: steps of 1, 2, 5 below ten seconds, then of clock times. At most `most` of them. */
export function timeTicks(from_s: number, to_s: number, most: number): Ticks {
  const span = to_s - from_s;
  if (!(span > 0) || !(most >= 1)) return { places: [], decimals: 0 };
  const step = TIME_STEPS_S.find((s) => span / s <= most) ?? 7200 * Math.ceil(span / most / 7200);
  return { places: multiples(from_s, to_s, step), decimals: Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) };
}

function multiples(from: number, to: number, step: number): number[] {
  const first = Math.ceil(from / step - 1e-9);
  const last = Math.floor(to / step + 1e-9);
  const places: number[] = [];
  for (let i = first; i <= last && places.length < LARGEST_COUNT; i++) places.push(i * step || 0);
  return places;
}

/** Label of a time: seconds below a minute of total span, else minutes and seconds as 2:05. */
export function timeLabel(time_s: number, decimals: number, whole_s: number): string {
  if (whole_s < 100) return time_s.toFixed(decimals);
  const scale = 10 ** decimals;
  const units = Math.round(time_s * scale);
  const minutes = Math.floor(units / (60 * scale));
  const rest = (units - minutes * 60 * scale) / scale;
  return `${minutes}:${rest.toFixed(decimals).padStart(decimals === 0 ? 2 : decimals + 3, '0')}`;
}
