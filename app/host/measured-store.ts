import type { DecodeAccount } from '../../src/recording/recording.ts';
import type { TrackOutcome } from '../../src/tracking/trace.ts';
import type { Fit } from './calculator-protocol.ts';
import type { ContentCache } from './content-cache.ts';

/** What following one segment yielded. */
export interface Followed {
  readonly outcome: TrackOutcome;
  readonly account: DecodeAccount;
}

const MOST_IN_MEMORY = 400;

/** Followed segments and their fits by content key: in memory, and the followed ones on disk too. */
export class MeasuredStore {
  readonly #followed = new Map<string, Followed>();
  readonly #fits = new Map<string, Fit>();
  readonly #cache: ContentCache;

  constructor(cache: ContentCache) {
    this.#cache = cache;
  }

  followed(key: string): Followed | null {
    return this.#followed.get(key) ?? null;
  }
  fit(key: string): Fit | null {
    return this.#fits.get(key) ?? null;
  }

  /** Looks on disk too. */
  async findFollowed(key: string): Promise<Followed | null> {
    const known = this.#followed.get(key) ?? (await this.#cache.get(key, isFollowed));
    if (known) keep(this.#followed, key, known);
    return known;
  }

  async putFollowed(key: string, followed: Followed): Promise<void> {
    keep(this.#followed, key, followed);
    await this.#cache.put(key, followed);
  }

  putFit(key: string, fit: Fit): void {
    keep(this.#fits, key, fit);
  }
}

function keep<T>(map: Map<string, T>, key: string, value: T): void {
  map.delete(key);
  map.set(key, value);
  for (const oldest of map.keys()) {
    if (map.size <= MOST_IN_MEMORY) break;
    map.delete(oldest);
  }
}

function isFollowed(value: unknown): value is Followed {
  if (typeof value !== 'object' || value === null || !('outcome' in value) || !('account' in value)) return false;
  const outcome = value.outcome as { ok?: unknown; trace?: { time_s?: unknown; angle?: unknown } };
  if (outcome.ok === false) return true;
  return (
    outcome.ok === true && outcome.trace?.time_s instanceof Float64Array && outcome.trace.angle instanceof Float64Array
  );
}
