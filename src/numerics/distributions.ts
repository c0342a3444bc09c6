import { incompleteBeta, incompleteGamma, incompleteGammaUpper } from './special-functions.ts';

/** Probability that a standard normal value lies below `x`. */
export function normalProbability(x: number): number {
  const tail = 0.5 * incompleteGammaUpper(0.5, (x * x) / 2);
  return x < 0 ? tail : 1 - tail;
}

/** Value below which a standard normal lies with probability `p` in (0, 1). RangeError outside. */
export function normalQuantile(p: number): number {
  return solve(p, 'normalQuantile', (x) => normalProbability(x));
}

/** Probability that Student's t with `dof` degrees of freedom (Infinity: normal) lies below `t`. */
export function studentProbability(t: number, dof: number): number {
  if (dof === Number.POSITIVE_INFINITY || dof > 1e9) return normalProbability(t);
  const tail = 0.5 * incompleteBeta(dof / (dof + t * t), dof / 2, 0.5);
  return t < 0 ? tail : 1 - tail;
}

/**
 * Value below which Student's t with `dof` > 0 degrees of freedom (any real number, Infinity: normal) lies with
 * probability `p` in (0, 1). The factor of a 95 % interval is `studentQuantile(0.975, dof)`. RangeError outside.
 */
export function studentQuantile(p: number, dof: number): number {
  if (!(dof > 0)) throw new RangeError(`studentQuantile: expected degrees of freedom above 0, got ${dof}`);
  return solve(p, 'studentQuantile', (x) => studentProbability(x, dof));
}

/** Probability that chi-square with `dof` degrees of freedom lies below `x`. */
export function chiSquareProbability(x: number, dof: number): number {
  return incompleteGamma(dof / 2, x / 2);
}

/** Both distributions are symmetric: solves on the lower tail, where probabilities keep their relative accuracy, and mirrors. */
function solve(p: number, name: string, probability: (x: number) => number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`${name}: expected a probability between 0 and 1, got ${p}`);
  if (p > 0.5) return -solve(1 - p, name, probability);
  let low = -1;
  while (probability(low) > p) low *= 2;
  let high = 0;
  for (let i = 0; i < 200 && high - low > 1e-15 * Math.abs(low); i++) {
    const middle = (low + high) / 2;
    if (probability(middle) > p) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
