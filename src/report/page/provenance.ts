import { numberText, typedText } from '../number-text.ts';
import type { Results } from '../results.ts';
import { html, type Markup, type Piece, table } from './html.ts';

/** Where the numbers come from: session, recordings, programs, rig and place. */
export function provenance(results: Results): Markup {
  const { session, recordings } = results;
  const rows = recordings.map((r) => [
    r.id,
    html`${r.file}<br><code>${r.content}</code>`,
    groups(r.bytes),
    typedText(r.time_scale),
    numberText(r.u_time_scale, 2),
  ]);
  return html`<section>
<h2>Session, recordings and programs</h2>
<dl class="facts">
<dt>Session file, SHA-256</dt><dd><code>${session.sha256}</code></dd>
<dt>Program</dt><dd>${results.program}</dd>
<dt>Decoder</dt><dd>${decoder(results.ffmpeg)}</dd>
</dl>
${
  rows.length === 0
    ? null
    : table({
        heads: ['Recording', 'File and content hash', 'Bytes', 'Time scale', html`<i>u</i>(time scale)`],
        rows,
        numbers: [2, 3, 4],
      })
}
${rig(results)}
</section>`;
}

const NAMES: Readonly<Record<string, readonly [string, string]>> = {
  turns_per_coil: ['Turns per coil', ''],
  turns_second_coil: ['Turns of the second coil', ''],
  radius_m: ['Coil radius', 'm'],
  radius_second_coil_m: ['Radius of the second coil', 'm'],
  spacing_m: ['Coil spacing', 'm'],
  constant_T_per_A: ['Coil constant', 'T/A'],
  shape: ['Shape', ''],
  mass_kg: ['Mass', 'kg'],
  length_m: ['Length', 'm'],
  diameter_m: ['Diameter', 'm'],
  width_m: ['Width', 'm'],
  inertia_kg_m2: ['Moment of inertia', 'kg m²'],
  stiffness_N_m_per_rad: ['Fibre stiffness', 'N m/rad'],
  f0_Hz: ['Frequency', 'Hz'],
  segment: ['Segment', ''],
  u_gain: ['Standard uncertainty of the scale', ''],
  u_zero_A: ['Standard uncertainty of the zero', 'A'],
  resolution_A: ['Step of the last digit', 'A'],
  latitude_deg: ['Latitude', '°'],
  longitude_deg: ['Longitude', '°'],
  height_m: ['Height', 'm'],
  date: ['Date', ''],
};

function rig({ apparatus, place }: Results): Markup | null {
  const parts = [
    ...partsOf('Coils', apparatus?.coil),
    ...Object.entries(apparatus ?? {})
      .filter(([name]) => name !== 'coil')
      .flatMap(([name, facts]) => partsOf(titleCase(name), facts)),
    ...partsOf('Place', place),
  ];
  const rows = parts.flatMap(([part, facts]) => {
    const entries = new Map(facts);
    return facts
      .filter(([key]) => !(key.startsWith('u_') && entries.has(key.slice(2))))
      .map(([key, value], i): Piece[] => {
        const [name, unit] = NAMES[key] ?? [key.replaceAll('_', ' '), ''];
        return [i === 0 ? part : '', name, shown(value), shown(entries.get(`u_${key}`)), unit];
      });
  });
  if (rows.length === 0) return null;
  return html`<h3>Apparatus as described in the session</h3>
${table({ heads: ['Part', 'Quantity', 'Value', 'Standard uncertainty', 'Unit'], rows, numbers: [2, 3] })}`;
}

type Facts = readonly (readonly [key: string, value: unknown])[];

/** A part of the rig and, after it, the parts within it (runs, bodies), each with its plain values. */
function partsOf(part: string, facts: object | undefined): (readonly [string, Facts])[] {
  const entries = Object.entries(facts ?? {}) as [string, unknown][];
  const isPart = (value: unknown): value is object => typeof value === 'object' && value !== null;
  const within = entries.flatMap(([key, value]) => {
    const name = `${part}, ${key.replaceAll('_', ' ')}`;
    if (!Array.isArray(value)) return isPart(value) ? partsOf(name, value) : [];
    return value.filter(isPart).flatMap((one, i) => partsOf(`${name}, ${i + 1}.`, one));
  });
  return [[part, entries.filter(([, value]) => !isPart(value))], ...within];
}

function titleCase(name: string): string {
  return name.charAt(0).toUpperCase() + name.slice(1).replaceAll('_', ' ');
}

function shown(value: unknown): string {
  if (typeof value === 'number') return typedText(value);
  return typeof value === 'string' ? value : '';
}

/** The version alone doesn't say of what it is one. */
function decoder(version: string): string {
  if (version === '') return 'not stated';
  return /^ffmpeg/i.test(version) ? version : `ffmpeg ${version}`;
}

/** Digits in groups of three, set apart by thin spaces. */
function groups(value: number): string {
  return String(value).replace(/\B(?=(\d{3})+$)/g, '\u2009');
}
