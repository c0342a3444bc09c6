import { misalignmentDensity, u_misalignment_rad } from './assumptions.ts';
import type { Turn } from './bar-on-fibre.ts';
import { fitHeld, type ScaledCandidate, type Scenario } from './candidates.ts';
import type { SweepFit } from './sweep-fit.ts';
import { at } from './sweep-model.ts';

/** The angles are cut into so many strips of equal width, with a fit for each. */
const strips = 10;
/** Points within each strip at which the probability is worked out. */
const gridSize = 40;
/** A strip less probable than this is left out. */
const negligible = 1e-4;
/** Beyond so many standard uncertainties of the assumption nothing is looked for. */
const reach = 4;

/**
 * Frequencies alone show a field across the coil axis only by a slight bend that goes with its square; often it is neither
 * plainly there nor plainly absent. Instead of taking the one or the other for certain, every misalignment is a scenario with
 * its probability, that of the assumption times the likelihood; so are the ways in which the fibre can have followed a bar that
 * turned round. The values are those of the most probable misalignment, which is none unless the data show one. `isBent`: they
 * show it beyond doubt; the candidate's own fit, which holds its uncertainty, then stays.
 */
export function withScenarios(candidate: ScaledCandidate, isBent: boolean): ScaledCandidate {
  const turns: readonly Turn[] = candidate.reversal_A === null ? ['free'] : ['set back', 'with the field'];
  const families = turns.flatMap((turn) => family(candidate, turn) ?? []);
  const least = Math.min(...families.map(({ level }) => level));
  const evidence = families.map(({ level, share }) => share * Math.exp(-(level - least) / 2));
  const total = evidence.reduce((sum, value) => sum + value, 0);
  if (!(total > 0)) return candidate;
  const probable = families.map((one, i) => ({ ...one, weight: evidence[i]! / total }));
  const own = families.find(({ turn }) => turn === candidate.proposal.turn) ?? families[0]!;
  if (isBent) {
    const ways = probable.map(({ turn, scenarios, weight }): Scenario => {
      const fit = { ...candidate.fit, model: { ...candidate.fit.model, turn }, parameters: meanParameters(scenarios) };
      return { turn, across_A: fit.parameters[at.across]!, fit, weight };
    });
    const here = ways.find(({ turn }) => turn === own.turn);
    const away = here === undefined ? null : here.fit.parameters;
    // Only what sets the ways apart: the mean of the own way differs a little from the fit that stays.
    const moved = ways.map((way) => {
      const parameters = candidate.fit.parameters.map(
        (value, k) => value + way.fit.parameters[k]! - (away?.[k] ?? value),
      );
      return { ...way, fit: { ...way.fit, parameters } };
    });
    return { ...candidate, scenarios: moved };
  }
  const scenarios = probable.flatMap((one) => one.scenarios.map((s) => ({ ...s, weight: s.weight * one.weight })));
  const likeliest = own.likeliest_A === 0 ? null : fitHeld(candidate, own.turn, own.likeliest_A);
  return { ...candidate, ...(likeliest && { fit: likeliest }), scenarios };
}

/** Mean of the scenarios' parameters. */
function meanParameters(scenarios: readonly Scenario[]): Float64Array {
  const mean = new Float64Array(scenarios[0]?.fit.parameters.length ?? 0);
  const total = scenarios.reduce((sum, { weight }) => sum + weight, 0);
  for (const { fit, weight } of scenarios) {
    fit.parameters.forEach((value, k) => {
      mean[k] = mean[k]! + (value * weight) / total;
    });
  }
  return mean;
}

interface Family {
  readonly turn: Turn;
  readonly scenarios: readonly Scenario[];
  /** The most probable field across, A. */
  readonly likeliest_A: number;
  /** -2 log of the probability of the data, with `share` times exp(-level / 2). */
  readonly level: number;
  readonly share: number;
}

/** All misalignments with one way of the fibre to follow; null where no fit ends. */
function family(candidate: ScaledCandidate, turn: Turn): Family | null {
  const along = Math.abs(candidate.fit.parameters[at.along]!);
  const fitAt = (square: number) => fitHeld(candidate, turn, Math.sqrt(square));
  const bare = fitAt(0);
  if (bare === null || !(along > 0)) return null;
  const likelihood = parabola(fitAt, bare, (u_misalignment_rad * along) ** 2);
  const density = angleDensity(likelihood, along);
  if (density === null) return null;
  const scenarios = density.strips.flatMap(({ square, weight }): Scenario[] => {
    const across_A = Math.sqrt(square);
    const fit = fitHeld(candidate, turn, across_A);
    if (fit === null) return [];
    // Where chi-square is not quite the parabola it was taken for, the weight says so.
    const surprise = fit.chiSquare - likelihood.at(square);
    return [{ turn, across_A, fit, weight: weight * Math.exp(-surprise / 2) }];
  });
  const sum = scenarios.reduce((total, { weight }) => total + weight, 0);
  if (!(sum > 0) || !Number.isFinite(sum)) return null;
  return {
    turn,
    scenarios: scenarios.map((one) => ({ ...one, weight: one.weight / sum })),
    likeliest_A: density.likeliest_A,
    level: density.level,
    share: density.share * sum,
  };
}

/** Chi-square against the square of the field across, which f0² goes with: a parabola through three fits. */
function parabola(fitAt: (square: number) => SweepFit | null, bare: SweepFit, usual: number) {
  let step = usual;
  let far: SweepFit | null = null;
  // A step that the data notice without being swamped, since far from the minimum chi-square is no parabola.
  for (let turn = 0; turn < 12; turn++) {
    far = fitAt(step);
    const rise = far === null ? Number.POSITIVE_INFINITY : Math.abs(far.chiSquare - bare.chiSquare);
    if (rise < 30) break;
    step *= Number.isFinite(rise) ? Math.max(Math.sqrt(8 / rise), 0.05) : 0.3;
  }
  const near = fitAt(step / 2);
  const [y0, y1, y2] = [bare.chiSquare, near?.chiSquare ?? bare.chiSquare, far?.chiSquare ?? bare.chiSquare];
  const curvature = Math.max((2 * (y2 - 2 * y1 + y0)) / step ** 2, 0);
  const slope = (y2 - y0) / step - curvature * step;
  return { curvature, slope, at: (square: number) => y0 + slope * square + curvature * square ** 2 };
}

/**
 * Probability of the angle, that of the assumption times the likelihood, in strips of equal width: of each its share and the
 * mean square of the field across, so that whatever goes with that square has the right mean.
 */
function angleDensity(likelihood: ReturnType<typeof parabola>, along: number) {
  const { curvature, slope } = likelihood;
  const top = curvature > 0 ? Math.max(-slope / (2 * curvature), 0) : 0;
  const wide = curvature > 0 ? 7 / Math.sqrt(curvature) : Number.POSITIVE_INFINITY;
  const from = Math.atan(Math.sqrt(Math.max(top - wide, 0)) / along);
  const to = Math.min(Math.atan(Math.sqrt(top + wide) / along), reach * u_misalignment_rad);
  if (!(to > from)) return null;
  const step = (to - from) / (strips * gridSize);
  const points = Array.from({ length: strips * gridSize }, (_, i) => {
    const angle = from + (i + 0.5) * step;
    const square = (along * Math.tan(angle)) ** 2;
    return { square, level: likelihood.at(square) - 2 * Math.log(misalignmentDensity(angle)) };
  });
  const best = points.reduce((least, point) => (point.level < least.level ? point : least));
  const { level } = best;
  const cut = Array.from({ length: strips }, (_, k) => {
    let weight = 0;
    let moment = 0;
    for (const point of points.slice(k * gridSize, (k + 1) * gridSize)) {
      const height = Math.exp(-(point.level - level) / 2);
      weight += height;
      moment += height * point.square;
    }
    return { square: moment / weight, weight };
  });
  const sum = cut.reduce((total, { weight }) => total + weight, 0);
  const kept = cut.filter(({ weight }) => weight > negligible * sum);
  return {
    strips: kept.map((strip) => ({ ...strip, weight: strip.weight / sum })),
    level,
    likeliest_A: best === points[0] && from === 0 ? 0 : Math.sqrt(best.square),
    share: sum * step,
  };
}
