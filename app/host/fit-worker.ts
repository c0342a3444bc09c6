import { parentPort } from 'node:worker_threads';
import { fitTrace } from '../../src/measuring/measure-segment.ts';
import type { FitAnswer, FitRequest } from './fit-protocol.ts';
import { spectraOf } from './spectra.ts';

/* The fitting thread: one request after the other, so that the host's own thread stays free. */
parentPort?.on('message', (request: FitRequest) => {
  const { number, outcome, options, apparatus } = request;
  let answer: FitAnswer;
  try {
    const { ringDown, checks } = fitTrace(outcome, options, apparatus);
    const spectra = outcome.ok ? spectraOf(outcome.trace, ringDown) : null;
    answer = { number, ok: true, fit: { ringDown, checks, spectra } };
  } catch (error) {
    answer = { number, ok: false, message: error instanceof Error ? error.message : String(error) };
  }
  parentPort?.postMessage(answer);
});
