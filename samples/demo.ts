// Measures the demo session and prints measured against true: `npm run demo`.
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { progressReporter } from '../src/progress-reporter.ts';
import { resultsTable } from '../src/report/results-table.ts';
import { compareCase, reductionLines, segmentLines } from './comparison.ts';
import { readCase } from './truth-file.ts';

// The recording is not copied into the build: from dist/samples it lies two levels up.
const root = fileURLToPath(new URL(import.meta.url.endsWith('.ts') ? '..' : '../..', import.meta.url));
const one = await readCase(join(root, 'samples', 'boathouse'));
process.stderr.write(
  'Measuring samples/boathouse, an invented bench whose recording is drawn, so that its true values are known.\n',
);
const progress = progressReporter(process.stderr, false);
const comparison = await compareCase(one, { onProgress: progress.show }).finally(progress.end);
const { results } = comparison.measurement;
process.stdout.write(`${resultsTable(results)}\n`);
process.stdout.write(
  `Measured against true\n\n${segmentLines(comparison).join('\n')}\n\n${reductionLines(comparison).join('\n')}\n`,
);
const faulty = comparison.segments.filter((segment) => segment.faults.length > 0);
process.stdout.write(
  faulty.length === 0
    ? `\nAll ${comparison.segments.length} segments are measured, within 3 u of the truth.\n`
    : `\n${faulty.length} of ${comparison.segments.length} segments are not as they ought to be: ${faulty.map((segment) => segment.measured.id).join(', ')}.\n`,
);
process.exitCode = faulty.length === 0 ? 0 : 1;
