#!/usr/bin/env node
import { dirname, resolve } from 'node:path';
import { stdout } from 'node:process';
import { Command, CommanderError } from 'commander';
import { measureSession } from './measure.ts';
import { progressReporter } from './progress-reporter.ts';
import { describeRecording } from './recording/describe-recording.ts';
import { findFfmpeg } from './recording/find-ffmpeg.ts';
import { InputError } from './recording/input-error.ts';
import { openRecording } from './recording/open-recording.ts';
import { reduceResults } from './reduce-results.ts';
import { findBrowser } from './report/pdf/find-browser.ts';
import { printPage } from './report/pdf/print-page.ts';
import { programVersion } from './report/program.ts';
import { readResults } from './report/read-results.ts';
import { reportFromFiles } from './report/report-files.ts';
import { resultsTable } from './report/results-table.ts';
import { writeResults } from './report/write-results.ts';
import { readSession } from './session/read-session.ts';

/** Exit statuses of the command, as in its contract. */
const EXIT = { measured: 0, someUnmeasured: 1, unusableInput: 2, interrupted: 130 } as const;

interface MeasureFlags {
  out?: string;
  traces?: boolean;
  quiet?: boolean;
}

function buildCommand(signal: AbortSignal, finish: (status: number) => void): Command {
  const command = new Command('needlebeat')
    .description('Times the oscillation of a suspended magnet from a recording.')
    .version(programVersion)
    .exitOverride()
    .showHelpAfterError();

  command
    .command('measure')
    .description('measure every segment of a session and reduce the frequencies')
    .argument('<session>', 'session file (*.needlebeat.json)')
    .option('--out <dir>', 'folder for the results (default: beside the session file)')
    .option('--traces', 'write one trace-<segment id>.csv per segment too')
    .option('--quiet', 'no progress and no table')
    .action(async (path: string, flags: MeasureFlags) => {
      const file = await readSession(path);
      const progress = progressReporter(process.stderr, flags.quiet === true);
      const measurement = await measureSession(file, { signal, onProgress: progress.show }).finally(progress.end);
      signal.throwIfAborted();
      await writeResults(resolve(flags.out ?? dirname(file.path)), measurement.results, {
        ...(flags.traces && { traces: measurement.segments }),
      });
      if (!flags.quiet) stdout.write(resultsTable(measurement.results));
      finish(measurement.results.segments.some((s) => s.status === 'unmeasured') ? EXIT.someUnmeasured : EXIT.measured);
    });

  command
    .command('inspect')
    .description('print the facts of a recording as JSON')
    .argument('<recording>', 'video file')
    .action(async (path: string) => {
      const tools = await findFfmpeg(process.env);
      const recording = await openRecording(resolve(path), tools, signal);
      stdout.write(`${JSON.stringify({ ...describeRecording(recording), ffmpeg: tools }, null, 2)}\n`);
      finish(EXIT.measured);
    });

  command
    .command('reduce')
    .description('repeat only the reduction, from a results file')
    .argument('<results>', 'results.json')
    .option('--out <dir>', 'folder for the new results (default: beside the results file)')
    .action(async (path: string, flags: { out?: string }) => {
      const results = reduceResults(await readResults(path));
      await writeResults(resolve(flags.out ?? dirname(resolve(path))), results, {});
      stdout.write(resultsTable(results));
      finish(EXIT.measured);
    });

  command
    .command('report')
    .description('write a page to print (report.html) from a results file')
    .argument('<results>', 'results.json')
    .option('--out <dir>', 'folder for the page (default: beside the results file)')
    .option('--pdf', 'print it as report.pdf too, by a Chromium, Chrome or Edge of this machine')
    .action(async (path: string, flags: { out?: string; pdf?: boolean }) => {
      const print = flags.pdf ? await printer(signal) : undefined;
      const written = await reportFromFiles(resolve(path), resolve(flags.out ?? dirname(resolve(path))), { print });
      stdout.write(written.map((file) => `${file}\n`).join(''));
      finish(EXIT.measured);
    });

  command
    .command('open')
    .description('open the window')
    .argument('[file]', 'session or recording')
    .action(async (path?: string) => {
      // The window is another layer: loaded only when asked for, so that the core runs without it.
      const url = new URL('../app/loopback/open.js', import.meta.url);
      const { openWindow } = (await import(url.href)) as {
        openWindow: (file?: string, signal?: AbortSignal) => Promise<void>;
      };
      await openWindow(path === undefined ? undefined : resolve(path), signal);
      finish(EXIT.measured);
    });
  return command;
}

/** What makes a PDF of a page. @throws InputError where no browser is found that could. */
async function printer(signal: AbortSignal): Promise<(page: string) => Promise<Uint8Array>> {
  const browser = await findBrowser(process.env, process.platform);
  if (browser === null) {
    const named = process.env.CHROMIUM_PATH;
    const why = named ? `CHROMIUM_PATH (${named}) can't be run` : 'neither CHROMIUM_PATH nor PATH names one';
    throw new InputError(
      `report.pdf needs a Chromium, Chrome or Edge to print it, and ${why}; without --pdf the page report.html is written, which any browser prints.`,
    );
  }
  return (page) => printPage(page, { browser, signal });
}

/** Runs the command line and returns the exit status. Nothing is left half-written: files are put in place whole. */
export async function run(args: readonly string[]): Promise<number> {
  const interruption = new AbortController();
  const interrupt = () => interruption.abort();
  process.on('SIGINT', interrupt).on('SIGTERM', interrupt);
  let status: number = EXIT.measured;
  const command = buildCommand(interruption.signal, (s) => {
    status = s;
  });
  try {
    await command.parseAsync([...args], { from: 'user' });
    return status;
  } catch (error) {
    if (interruption.signal.aborted) return EXIT.interrupted;
    if (error instanceof CommanderError) return error.exitCode === 0 ? EXIT.measured : EXIT.unusableInput;
    if (error instanceof InputError) {
      process.stderr.write(`needlebeat: ${error.message}\n`);
      return EXIT.unusableInput;
    }
    throw error;
  } finally {
    process.off('SIGINT', interrupt).off('SIGTERM', interrupt);
  }
}

process.exitCode = await run(process.argv.slice(2));
