import { describe, expect, it } from 'vitest';
import { studentQuantile } from '../../src/numerics/distributions.ts';
import { combinedUncertainty, effectiveDof } from '../../src/numerics/welch-satterthwaite.ts';

describe('effective degrees of freedom', () => {
  it('JCGM 100:2008, G.4.1, example', () => {
    // Printed (from memory): 0.25 %, 0.57 %, 0.82 % with 9, 4, 14 give 1.03 %, 19.0 and an expanded uncertainty of 2.2 %.
    const rows = [
      { u: 0.25, dof: 9 },
      { u: 0.57, dof: 4 },
      { u: 0.82, dof: 14 },
    ];
    expect(combinedUncertainty(rows)).toBeCloseTo(1.0295, 4);
    expect(effectiveDof(rows)).toBeCloseTo(18.9987, 3);
    expect(studentQuantile(0.975, 19) * combinedUncertainty(rows)).toBeCloseTo(2.155, 3);
  });

  it('JCGM 100:2008, H.1, end gauge', () => {
    // Inputs as in the annex, nm; printed (from memory): 32 nm, 16.7; t99(16) = 2.92, U99 = 93 nm.
    const comparison = [
      { u: 5.8, dof: 24 },
      { u: 3.9, dof: 5 },
      { u: 6.7, dof: 8 },
    ];
    expect(combinedUncertainty(comparison)).toBeCloseTo(9.682, 3);
    expect(effectiveDof(comparison)).toBeCloseTo(25.447, 2);
    const rows = [{ u: 25, dof: 18 }, ...comparison, { u: 2.8868, dof: 50 }, { u: 16.599, dof: 2 }];
    expect(combinedUncertainty(rows)).toBeCloseTo(31.6639, 3);
    expect(effectiveDof(rows)).toBeCloseTo(16.752, 2);
    expect(studentQuantile(0.995, 16)).toBeCloseTo(2.920782, 5);
  });

  it('is infinite where every contribution is exactly known', () => {
    expect(effectiveDof([{ u: 1, dof: Number.POSITIVE_INFINITY }])).toBe(Number.POSITIVE_INFINITY);
    expect(effectiveDof([])).toBe(Number.POSITIVE_INFINITY);
  });
});
