import type { SegmentResult } from '../../contract.ts';

type Check = SegmentResult['checks'][number];

const WORDS: Readonly<Record<Check['severity'], string>> = { note: 'Note', doubt: 'Doubt', fault: 'Fault' };
const ORDER: readonly Check['severity'][] = ['fault', 'doubt', 'note'];

/** Findings as plain sentences, the gravest first. */
export function CheckList({ checks, none }: { checks: readonly Check[]; none: string }) {
  if (checks.length === 0) return <p class="quiet">{none}</p>;
  const sorted = [...checks].sort((a, b) => ORDER.indexOf(a.severity) - ORDER.indexOf(b.severity));
  return (
    <ul class="checks">
      {sorted.map((check, i) => (
        <li key={`${check.code} ${i}`} data-severity={check.severity}>
          <svg viewBox="0 0 12 12" width="12" height="12" aria-hidden="true">
            {check.severity === 'fault' ? <path d="M2 2l8 8M10 2l-8 8" class="line" /> : null}
            {check.severity === 'doubt' ? <path d="M6 1.500 11 10.500H1Z" class="solid" /> : null}
            {check.severity === 'note' ? <circle cx="6" cy="6" r="2" class="solid" /> : null}
          </svg>
          <span>
            <b>{WORDS[check.severity]}</b> {check.message}
          </span>
        </li>
      ))}
    </ul>
  );
}
