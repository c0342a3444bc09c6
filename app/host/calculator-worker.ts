import { parentPort } from 'node:worker_threads';
import { assembleResults } from '../../src/measure.ts';
import { fitTrace } from '../../src/measuring/measure-segment.ts';
import type { Results } from '../../src/report/results.ts';
import type { CalculatorAnswer, CalculatorRequest, CalculatorTask, Fit } from './calculator-protocol.ts';
import { spectraOf } from './spectra.ts';

/* The calculating thread: one request after the other, so that the host's own thread stays free. */
parentPort?.on('message', ({ number, task }: CalculatorRequest) => {
  let answer: CalculatorAnswer;
  try {
    answer = { number, ok: true, value: calculate(task) };
  } catch (error) {
    answer = { number, ok: false, message: error instanceof Error ? (error.stack ?? error.message) : String(error) };
  }
  parentPort?.postMessage(answer);
});

function calculate(task: CalculatorTask): Fit | Results {
  switch (task.kind) {
    case 'fit': {
      const { outcome, options, apparatus } = task;
      const { ringDown, checks } = fitTrace(outcome, options, apparatus);
      return { ringDown, checks, spectra: outcome.ok ? spectraOf(outcome.trace, ringDown) : null };
    }
    case 'results': {
      const { file, recordings, rows, tools } = task;
      const segments = new Map(rows.map((result) => [result.id, { trace: null, ringDown: null, result }]));
      return assembleResults(file, recordings, segments, tools);
    }
    default:
      return task satisfies never;
  }
}
