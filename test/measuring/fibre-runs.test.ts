import { describe, expect, it } from 'vitest';
import { apparatusOf } from '../../src/measuring/measure-segment.ts';
import { pointOf } from '../../src/measuring/point.ts';
import { reduceResults } from '../../src/reduce-results.ts';
import { parseSession } from '../../src/session/read-session.ts';
import { exampleResults } from '../report/support/results-fixture.ts';

describe('segments that tell the fibre’s stiffness', () => {
  const fibre = { stiffness_N_m_per_rad: 2e-6, run_without_field: { segment: 's02' } };
  const magnet = { inertia_kg_m2: 5.7e-6 };
  const segment = { recording: 'A', view: 'v1', current_A: null };
  const session = parseSession(
    JSON.stringify({
      format: 'needlebeat/session',
      version: 1,
      recordings: [{ id: 'A', file: 'a.mp4' }],
      apparatus: { magnet, fibre },
      views: [{ id: 'v1', recording: 'A', kind: 'plan', region: { x: 0, y: 0, width: 9, height: 9 } }],
      segments: [
        { ...segment, id: 's01', start_s: 0, end_s: 10 },
        { ...segment, id: 's02', start_s: 10, end_s: 20 },
      ],
    }),
    'a.needlebeat.json',
  );

  it('are fitted without what is known of the fibre in the sweep, which does not hold in them', () => {
    const [step, run] = session.segments;
    expect(apparatusOf(session, step!)).toEqual({ magnet, fibre });
    expect(apparatusOf(session, run!)).toEqual({ magnet });
  });

  it('give the frequency that a fibre alone makes: as observed, less the damping, with no allowance for the amplitude', () => {
    const [row] = exampleResults().segments;
    const point = pointOf({ ...row!, fd_Hz: 0.3, u_fd_Hz: 1e-4, gamma_per_s: 0.8 * Math.PI });
    // f0² = fd² + (γ/2π)²: 0.09 + 0.16.
    expect(point.torsion_Hz).toMatchObject({ u: 1e-4 });
    expect(point.torsion_Hz!.value).toBeCloseTo(0.5, 12);
    expect(pointOf({ ...row!, gamma_per_s: null }).torsion_Hz).toBeNull();
  });

  it('are found again where a results file is reduced anew', () => {
    const results = exampleResults();
    const rows = results.segments.map((row) =>
      row.id === 's01' ? { ...row, fd_Hz: 0.0967, u_fd_Hz: 1e-4, gamma_per_s: 1e-3, current_A: null } : row,
    );
    const apparatus = { ...results.apparatus, magnet, fibre: { run_without_field: { segment: 's01' } } };
    const { reduction } = reduceResults({ ...results, apparatus, segments: rows });
    expect(reduction.points_used).not.toContain('s01');
    expect(reduction.model?.fibre).toBe('given');
    expect(reduction.fibre_sources).toMatchObject([{ origin: 'run without field', segments: ['s01'], weight: 1 }]);
    const expected = 4 * Math.PI ** 2 * magnet.inertia_kg_m2 * 0.0967 ** 2;
    expect(reduction.fibre_sources[0]!.stiffness_N_m_per_rad! / expected).toBeCloseTo(1, 4);
  });
});
