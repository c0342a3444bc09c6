import { describe, expect, it } from 'vitest';
import { normalProbability } from '../../src/numerics/distributions.ts';
import { expandedUncertainty } from '../../src/reduction/coverage-factor.ts';

const normal = { u: 1, dof: Number.POSITIVE_INFINITY, halfWidths: [], alternatives: [] };

describe('the half-width of a 95 % interval', () => {
  it('is that of the normal distribution or of Student’s t where nothing else is in it', () => {
    // JCGM 100:2008, table G.2: 1.960, and 2.23 for 10 degrees of freedom.
    expect(expandedUncertainty(normal)).toBeCloseTo(1.96, 3);
    expect(expandedUncertainty({ ...normal, dof: 10 })).toBeCloseTo(2.228, 3);
  });

  it('is 0.95 of the half-width of an even distribution (JCGM 100:2008, G.1.5, note, has 1.65 u)', () => {
    const even = expandedUncertainty({ ...normal, u: 1e-4, halfWidths: [Math.sqrt(3)] });
    expect(even).toBeCloseTo(1.645, 1);
    expect(even / (0.95 * Math.sqrt(3))).toBeCloseTo(1, 1);
  });

  it('is that of a normal and an even part together, by integration', () => {
    const half = 2;
    const width = expandedUncertainty({ ...normal, halfWidths: [half] });
    const n = 20_000;
    let held = 0;
    for (let i = 0; i < n; i++) {
      const shift = half * ((2 * i + 1) / n - 1);
      held += (normalProbability(width - shift) - normalProbability(-width - shift)) / n;
    }
    expect(held).toBeCloseTo(0.95, 3);
  });

  it('covers values that exclude each other by their probabilities', () => {
    const far = expandedUncertainty({ ...normal, alternatives: [[{ shift: 10, weight: 0.2 }]] });
    // A fifth lies about 10: 0.15 of 0.2 must be held there, all near 0 is.
    expect(normalProbability(far - 10)).toBeCloseTo(0.75, 4);
    const rare = expandedUncertainty({ ...normal, alternatives: [[{ shift: 10, weight: 0.01 }]] });
    expect(2 * normalProbability(rare) - 1).toBeCloseTo(0.95 / 0.99, 4);
  });
});
