import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { TrackerPool } from '../../src/tracking/pool.ts';
import type { AboutFacts, HostEvents } from '../contract.ts';
import type { Calculator } from './calculator.ts';
import type { Jobs } from './jobs.ts';
import type { LayoutFile } from './layout-file.ts';
import type { Measuring } from './measuring.ts';
import type { Overviews } from './overviews.ts';
import type { Pictures } from './pictures.ts';
import type { Saving } from './saving.ts';
import type { Handlers } from './serve-window.ts';
import type { SessionKeeper } from './session-keeper.ts';
import type { Shell } from './shell.ts';
import type { Tokens } from './tokens.ts';

/** What the host is given from outside. */
export interface HostOptions {
  /** Folder for what is kept between runs. */
  readonly userFolder: string;
  readonly env: NodeJS.ProcessEnv;
  /** Processor cores that may be used. */
  readonly cores: number;
  /** Native dialogs and menu; null: the window has them itself. */
  readonly shell: Shell | null;
  /** Whether a browser fetches what is saved and posts what is opened. */
  readonly browser: boolean;
  /** Session file of the demo. */
  readonly demo: string;
  /** Names and versions of what the program runs on. */
  readonly runtime: AboutFacts['runtime'];
  /** Told of mistakes of the program. */
  readonly report: (error: unknown) => void;
  readonly now_ms?: () => number;
  /** ISO 8601. */
  readonly now?: () => string;
}

/** The parts that answer calls. */
export interface Parts {
  readonly options: HostOptions & { readonly now: () => string; readonly now_ms: () => number };
  readonly keeper: SessionKeeper;
  readonly measuring: Measuring;
  readonly fits: Calculator;
  readonly pool: TrackerPool;
  /** For what the user waits for right now. */
  readonly quickPool: TrackerPool;
  readonly tools: () => Promise<FfmpegTools>;
  readonly tokens: Tokens;
  readonly saving: Saving;
  readonly layout: LayoutFile;
  readonly jobs: Jobs;
  readonly pictures: Pictures;
  readonly overviews: Overviews;
  /** Tells every window. */
  readonly broadcast: <K extends keyof HostEvents>(name: K, value: HostEvents[K]) => void;
}

/** Some of the contract's handlers. */
export type Some<K extends keyof Handlers> = Pick<Handlers, K>;
