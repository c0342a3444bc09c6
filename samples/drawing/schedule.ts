import type { BenchPlan, Step } from './bench.ts';
import { restDirection_rad } from './magnet.ts';

/** A time in which the hand holds the bar: it leads the bar to `release_rad` and lets go at the end. */
export interface Contact {
  readonly start_s: number;
  readonly end_s: number;
  readonly release_rad: number;
  /** Pendulum displacement at which it lets go, metres along and across the coil axis. */
  readonly swing_m: readonly [number, number];
}

/** One step placed in time. */
export interface ScheduledStep {
  readonly step: Step;
  /** When the current reaches its new value. */
  readonly set_s: number;
  readonly start_s: number;
  readonly end_s: number;
  readonly rest_rad: number;
  readonly current_A: number;
  readonly contacts: readonly Contact[];
}

/** The whole run in time. */
export interface Schedule {
  readonly steps: readonly ScheduledStep[];
  readonly length_s: number;
  /** Times, ascending, at which the current changes, with the current that flows and the one the meter shows from then on. */
  readonly currents: readonly { readonly time_s: number; readonly current_A: number; readonly shown_A: number }[];
}

const CONTACT_FROM = 0.36;
const CONTACT_TO = 0.7;
const RENUDGE_s = 0.5;

const toMillisecond = (time_s: number): number => Math.round(time_s * 1000) / 1000;

/**
 * Places the steps of a plan in time. In each gap the current is turned to its new value in a few clicks, then the hand takes
 * the bar and lets it go; the segment begins when the hand has left. All times fall on whole milliseconds.
 */
export function scheduleOf(plan: BenchPlan): Schedule {
  const steps: ScheduledStep[] = [];
  const currents: { time_s: number; current_A: number; shown_A: number }[] = [];
  let now = plan.lead_s;
  let rest = (plan.apparatus.misalignment_deg * Math.PI) / 180;
  let before = 0;
  for (const step of plan.steps) {
    const current = step.trueCurrent_A ?? step.current_A;
    const clicks = 4;
    for (let click = 1; click <= clicks; click++) {
      const share = click / clicks;
      const last = click === clicks;
      const shown = before + share * (step.current_A - before);
      currents.push({
        time_s: toMillisecond(now + 0.08 * plan.gap_s * share),
        current_A: last ? current : shown,
        shown_A: last ? step.current_A : shown,
      });
    }
    rest = restDirection_rad(plan.apparatus, current, rest);
    const release = rest + (step.amplitude_deg * Math.PI) / 180;
    const swing = step.swing_m ?? [0, 0];
    const contacts: Contact[] = [
      {
        start_s: toMillisecond(now + CONTACT_FROM * plan.gap_s),
        end_s: toMillisecond(now + CONTACT_TO * plan.gap_s),
        release_rad: release,
        swing_m: swing,
      },
    ];
    const start = toMillisecond(now + plan.gap_s);
    if (step.renudge_s !== undefined) {
      const at = toMillisecond(start + step.renudge_s);
      contacts.push({ start_s: at, end_s: toMillisecond(at + RENUDGE_s), release_rad: release, swing_m: swing });
    }
    const end = toMillisecond(start + step.hold_s);
    steps.push({
      step,
      set_s: toMillisecond(now + 0.08 * plan.gap_s),
      start_s: start,
      end_s: end,
      rest_rad: rest,
      current_A: current,
      contacts,
    });
    before = step.current_A;
    now = end;
  }
  return { steps, length_s: now + 0.4, currents };
}
