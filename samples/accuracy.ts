// Measures sessions whose truth is known and says how far off they are: `npm run accuracy -- DIRECTORY…`.
// Exit status 1 where a segment that ought to be measured isn't, is beyond 3 u of the truth, or has u of 3e-4 f0 or more.
import { progressReporter } from '../src/progress-reporter.ts';
import { InputError } from '../src/recording/input-error.ts';
import { compareCase, reductionLines, rmsRatio, type SegmentComparison, segmentLines } from './comparison.ts';
import { readCase } from './truth-file.ts';

const directories = process.argv.slice(2);
if (directories.length === 0) {
  process.stderr.write(
    'Which folders? Each needs a session file (*.needlebeat.json) with truth.json or *.truth.json beside it.\n',
  );
  process.exit(2);
}
const all: SegmentComparison[] = [];
let unusable = 0;
for (const directory of directories) {
  const progress = progressReporter(process.stderr, false);
  try {
    const one = await readCase(directory);
    const began = performance.now();
    const comparison = await compareCase(one, { onProgress: progress.show }).finally(progress.end);
    const took_s = (performance.now() - began) / 1000;
    all.push(...comparison.segments);
    const rms = rmsRatio(comparison.segments);
    process.stdout.write(
      `\n${one.name} (${one.truth.view}, ${took_s.toFixed(1)} s, rms of err/u ${rms === null ? '–' : rms.toFixed(2)})\n`,
    );
    process.stdout.write(`${segmentLines(comparison).join('\n')}\n\n${reductionLines(comparison).join('\n')}\n`);
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    unusable += 1;
    process.stdout.write(`\n${directory}: ${error.message}\n`);
  }
}
const faulty = all.filter((segment) => segment.faults.length > 0);
const rms = rmsRatio(all);
process.stdout.write(
  `\n${all.length} segments, ${all.length - faulty.length} as they ought to be, ${faulty.length} not; rms of err/u ${rms === null ? '–' : rms.toFixed(2)}\n`,
);
process.exitCode = faulty.length > 0 || unusable > 0 ? 1 : 0;
