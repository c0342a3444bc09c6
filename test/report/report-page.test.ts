import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { reportPage } from '../../src/report/report-page.ts';
import type { Results } from '../../src/report/results.ts';
import { exampleResults } from './support/results-fixture.ts';
import { elementsOf } from './support/well-formed.ts';

const HOSTILE = '"><script>alert(1)</script><img src=x onerror="x()">\u0000\u202e</style></svg>&nbsp;\'';

/** The results with a hostile text wherever the file holds a free text. */
function hostileResults(): Results {
  const words = new Set([
    'id',
    'note',
    'left_out',
    'message',
    'reason',
    'sentence',
    'program',
    'ffmpeg',
    'file',
    'content',
  ]);
  const names = new Set(['title', 'sha256', 'input', 'name', 'unit', 'view', 'recording']);
  const poisoned = (value: unknown, key: string, parent: string): unknown => {
    if (Array.isArray(value)) return value.map((entry) => poisoned(entry, key, parent));
    if (typeof value === 'object' && value !== null) {
      return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, poisoned(v, k, key)]));
    }
    // The names of results in the Monte Carlo table are among a fixed set: the reader refuses others.
    if (typeof value === 'string' && key === 'name' && parent === 'results') return value;
    return typeof value === 'string' && (words.has(key) || names.has(key)) ? `${value}${HOSTILE}` : value;
  };
  return poisoned(exampleResults(), '', '') as Results;
}

const hostileTraces = (results: Results) =>
  new Map(
    results.segments.map((s) => [
      s.id,
      {
        id: s.id,
        time_s: [0, 1, 2],
        angle: [1, 0, -1],
        unit: 'deg' as const,
        fitted: [1, 0, -1],
        residual: [0, 0, 0],
        used: [1, 1, 0],
      },
    ]),
  );

describe('the report page', () => {
  const page = reportPage(exampleResults(), { madeOn: '2026-12-01' });

  it('is well-formed and has one heading, one style sheet and a language', () => {
    const elements = elementsOf(page);
    expect(elements.filter((e) => e.name === 'h1')).toHaveLength(1);
    expect(elements.filter((e) => e.name === 'style')).toHaveLength(1);
    expect(elements.find((e) => e.name === 'html')?.attributes.lang).toBe('en');
  });

  it('shows what was known of the fibre, from which segments, with what weight', () => {
    const results = exampleResults();
    const source = {
      origin: 'run without field',
      segments: ['s09'],
      fibre_Hz2: 0.0123,
      u_fibre_Hz2: 0.0002,
      stiffness_N_m_per_rad: 2.1e-6,
      u_stiffness_N_m_per_rad: 4e-8,
      weight: 1,
    } as const;
    const run = { length_m: 0.25, u_length_m: 1e-3, f0_Hz: 0.9, u_f0_Hz: 1e-4, segment: null };
    const fibre_lengths = {
      magnetic_Hz2: 0.8,
      u_magnetic_Hz2: 0.001,
      slope_Hz2_m: 0.0025,
      u_slope_Hz2_m: 0.0002,
      scatter_Hz2: null,
      runs: [{ ...run, fitted_f0_squared_Hz2: 0.81, residual_Hz2: 0.00021 }],
    };
    const apparatus = {
      fibre: { length_m: 0.3, run_without_field: { segment: 's09', body: { inertia_kg_m2: 1e-6 } } },
    };
    const reduction = { ...results.reduction, fibre_sources: [source], fibre_lengths };
    const shown = reportPage({ ...results, apparatus, reduction });
    elementsOf(shown);
    const text = shown.replace(/<[^>]*>/g, ' ').replace(/\s+/g, ' ');
    expect(text).toContain('run without field s09 0.01230 ± 0.00020 (2.100 ± 0.040) × 10⁻⁶ 100.0 %');
    expect(text).toContain('0.25 – 0.81000 ± 0.00018 0.810000 2.1 × 10⁻⁴');
    expect(text).toContain('Fibre, run without field, body Moment of inertia 0.000001');
  });

  it('forbids everything but its own style sheet', () => {
    const [style = ''] = page.match(/(?<=<style>)[\s\S]*?(?=<\/style>)/) ?? [];
    const hash = createHash('sha256').update(style).digest('base64');
    const policy = elementsOf(page).find((e) => e.attributes['http-equiv'] === 'Content-Security-Policy');
    expect(policy?.attributes.content?.replaceAll('&#39;', "'")).toBe(
      `default-src 'none'; style-src 'sha256-${hash}'; base-uri 'none'; form-action 'none'`,
    );
  });

  it('fetches nothing and runs nothing', () => {
    for (const { name, attributes } of elementsOf(page)) {
      expect(['script', 'iframe', 'object', 'embed', 'link', 'img', 'form', 'base', 'a', 'use', 'image']).not.toContain(
        name,
      );
      for (const key of Object.keys(attributes)) expect(key).not.toMatch(/^on|^href$|^src$|^style$|^xlink:/);
    }
    expect(page.replaceAll('http://www.w3.org/2000/svg', '')).not.toMatch(/https?:|url\((?!#)|@import/);
  });

  it('stays harmless with hostile titles, ids, notes, sentences and names', () => {
    const results = hostileResults();
    const hostile = reportPage(results, {
      traces: hostileTraces(results),
      strangers: [HOSTILE],
      madeOn: HOSTILE,
    });
    const elements = elementsOf(hostile);
    expect(elements.map((e) => e.name)).not.toContain('script');
    expect(elements.map((e) => e.name)).not.toContain('img');
    // biome-ignore lint/suspicious/noControlCharactersInRegex: their absence is what is tested.
    expect(hostile).not.toMatch(/[\u0000-\u0008\u202a-\u202e]/);
    expect(hostile).toContain('&lt;script&gt;alert(1)&lt;/script&gt;');
    const ids = elements.flatMap((e) => e.attributes.id ?? []);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('shows title, versions and hashes', () => {
    const { session, recordings, program, ffmpeg } = exampleResults();
    for (const text of [session.title, session.sha256, recordings[0]?.content, program, ffmpeg, '2026-12-01']) {
      expect(page).toContain(text);
    }
  });

  it('shows the cautions', () => {
    expect(page).toContain('Coils get hot at high current');
    expect(page).toContain('Strong magnets pinch fingers');
    expect(page).toContain('accredited laboratory');
  });

  it('shows every segment with its numbers, checks as sentences, reasons and notes', () => {
    for (const { id } of exampleResults().segments) expect(page).toContain(`<td>${id}</td>`);
    expect(page).toContain('nudge the bar anew without touching the fibre');
    expect(page).toContain('left out by the user: meter was still settling');
    expect(page).toContain('Lamp went out');
    expect(page).toContain('Typed &quot;0,400&quot;; read again later, seen 0.398');
  });

  it('shows the budget with all columns of JCGM 100 and shares that follow from the contributions', () => {
    for (const head of [
      'Quantity',
      'Value',
      'Standard uncertainty',
      'Sensitivity',
      'Contribution',
      'Degrees of freedom',
      'Share',
    ]) {
      expect(page).toMatch(new RegExp(`<th scope="col"[^>]*>${head}`));
    }
    // (2.6e-7 / 3.1e-7)² = 0.7034
    expect(page).toMatch(/fibre share<\/td>.*70\.3\u00a0%<\/td>/);
    expect(page).toContain('u</i> = 3.1 × 10⁻⁷');
  });

  it('shows correlations, the cross-check by Monte Carlo and the expected field', () => {
    expect(page).toContain('Correlation of the results');
    expect(page).toContain('2000 draws of all inputs, seed 1.');
    expect(page).toMatch(/World Magnetic Model 2025 expects a horizontal field of 18\.91/);
    expect(page).toContain('steel in a building shifts the real field far more');
  });

  it('holds the plot against current, and ring-downs only where there are traces', () => {
    expect(page.match(/<svg /g)).toHaveLength(1);
    expect(page).not.toContain('Ring-downs');
    const results = exampleResults();
    const one = new Map([...hostileTraces(results)].slice(0, 1));
    expect(reportPage(results, { traces: one }).match(/<svg /g)).toHaveLength(2);
  });

  it('does with results that hold next to nothing', () => {
    const results = exampleResults();
    const bare = {
      ...results,
      session: { title: '', sha256: '' },
      recordings: [],
      ffmpeg: '',
      segments: [],
      reduction: {
        ...Object.fromEntries(
          Object.entries(results.reduction).map(([key, value]) => [key, Array.isArray(value) ? [] : null]),
        ),
        budget: {},
        correlation: { results: [], matrix: [] },
      } as unknown as Results['reduction'],
    };
    const { apparatus: _, place: __, ...without } = bare;
    const empty = reportPage(without);
    expect(elementsOf(empty).filter((e) => e.name === 'svg')).toHaveLength(0);
    expect(empty).toContain('Untitled session');
    expect(empty).toContain('No result could be had.');
    expect(empty).not.toMatch(/undefined|NaN|Infinity|\[object/);
  });

  it('never writes a number that is none', () => {
    expect(page).not.toMatch(/undefined|NaN|Infinity|\[object/);
  });
});
