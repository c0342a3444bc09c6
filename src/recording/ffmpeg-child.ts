import { type ChildProcess, spawn } from 'node:child_process';
import type { Readable } from 'node:stream';

/** How long a child may run. Both are wall-clock seconds; ffmpeg's own limit counts processor time and isn't on every system. */
export interface Deadlines {
  /** From start to exit; null for work whose length depends on the recording. */
  readonly whole_s: number | null;
  /** Without a byte of output while we are ready to read. */
  readonly silence_s: number;
}

/** How a child ended: always this shape, whether it went well or not. */
export interface ChildEnd {
  /** Exit code, null where it was killed or never started. */
  readonly code: number | null;
  /** The last few kilobytes it wrote to stderr. */
  readonly stderr: string;
  /** Why we ended it, or why it couldn't be started; null where it ended by itself. */
  readonly stopped: 'aborted' | 'deadline' | 'silence' | 'not started' | null;
}

/** A running ffmpeg or ffprobe. */
export interface FfmpegChild {
  readonly stdout: Readable;
  /** The extra pipe on descriptor 3, where one was asked for. */
  readonly extra: Readable | null;
  /** Settles after the process has exited and its pipes are closed; never rejects. */
  readonly end: Promise<ChildEnd>;
  /** Says that output arrived: puts the no-progress deadline off. */
  progressed(): void;
  /** Stops the no-progress clock while the reader itself isn't ready for more; `progressed` starts it again. */
  waiting(): void;
  /** Kills the child and waits for its exit; safe to call twice. */
  close(): Promise<ChildEnd>;
}

const stderrKept_chars = 4096;

/**
 * Starts ffmpeg or ffprobe on an untrusted file: arguments as an array, no shell, no stdin, an empty environment, its
 * stderr always drained, ended by the signal or by a deadline. (fluent-ffmpeg gives its child our whole environment, no extra
 * pipe, and for probing neither a way to end it nor a bound on its output; so it only builds command lines here.)
 */
export function startChild(
  program: string,
  args: readonly string[],
  options: { readonly deadlines: Deadlines; readonly extraPipe?: boolean; readonly signal?: AbortSignal | undefined },
): FfmpegChild {
  const { deadlines, signal } = options;
  const child = spawn(program, args, {
    stdio: options.extraPipe ? ['ignore', 'pipe', 'pipe', 'pipe'] : ['ignore', 'pipe', 'pipe'],
    env: childEnvironment(),
    shell: false,
    windowsHide: true,
  });
  let stopped: ChildEnd['stopped'] = null;
  let ended = false;
  const stop = (reason: NonNullable<ChildEnd['stopped']>) => {
    if (ended) return;
    stopped ??= reason;
    child.kill('SIGKILL');
    // A reader that has left would keep the pipes, and with them the end, open for ever.
    for (const pipe of child.stdio) pipe?.destroy();
  };

  const onAbort = () => stop('aborted');
  signal?.addEventListener('abort', onAbort, { once: true });
  if (signal?.aborted) stop('aborted');
  const wholeTimer =
    deadlines.whole_s === null ? undefined : setTimeout(() => stop('deadline'), deadlines.whole_s * 1000);
  // One interval looks at the time of the last output: cheaper than a timer set anew for every chunk.
  let lastOutput_ms: number | null = performance.now();
  const silenceTimer = setInterval(
    () => {
      if (lastOutput_ms !== null && performance.now() - lastOutput_ms > deadlines.silence_s * 1000) stop('silence');
    },
    Math.min(1000, deadlines.silence_s * 250),
  );

  const end = childEnd(child, () => {
    ended = true;
    signal?.removeEventListener('abort', onAbort);
    clearTimeout(wholeTimer);
    clearInterval(silenceTimer);
    return stopped;
  });
  return {
    stdout: child.stdout as Readable,
    extra: (child.stdio[3] as Readable | undefined) ?? null,
    end,
    progressed: () => {
      lastOutput_ms = performance.now();
    },
    waiting: () => {
      lastOutput_ms = null;
    },
    close: () => {
      stop('aborted');
      return end;
    },
  };
}

/** Runs a child to its end and gives what it wrote to stdout; more than `limit_bytes` ends it as if it had missed its deadline. */
export async function childOutput(
  program: string,
  args: readonly string[],
  options: { readonly deadlines: Deadlines; readonly limit_bytes: number; readonly signal?: AbortSignal | undefined },
): Promise<ChildEnd & { readonly stdout: Buffer }> {
  const child = startChild(program, args, options);
  const chunks: Buffer[] = [];
  let length = 0;
  child.stdout.on('data', (chunk: Buffer) => {
    child.progressed();
    length += chunk.length;
    if (length > options.limit_bytes) void child.close();
    else chunks.push(chunk);
  });
  const end = await child.end;
  options.signal?.throwIfAborted();
  return { ...end, stdout: Buffer.concat(chunks) };
}

function childEnd(child: ChildProcess, finish: () => ChildEnd['stopped']): Promise<ChildEnd> {
  let stderr = '';
  child.stderr?.setEncoding('utf8');
  child.stderr?.on('data', (text: string) => {
    stderr = (stderr + text).slice(-stderrKept_chars);
  });
  // Destroying a pipe under a writing child makes errors of no interest.
  for (const pipe of child.stdio) pipe?.on('error', () => {});
  return new Promise((resolve) => {
    child.once('error', (error) => {
      stderr += error.message;
      if (child.pid === undefined) {
        finish();
        resolve({ code: null, stderr, stopped: 'not started' });
      }
    });
    child.once('close', (code) => resolve({ code, stderr, stopped: finish() }));
  });
}

function childEnvironment(): NodeJS.ProcessEnv {
  if (process.platform !== 'win32') return {};
  const { SystemRoot, SystemDrive, TEMP, TMP } = process.env;
  return { SystemRoot, SystemDrive, TEMP, TMP };
}
