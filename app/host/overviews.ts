import type { ContentCache } from './content-cache.ts';
import type { OverviewTrace } from './overview-trace.ts';

const MOST_IN_MEMORY = 24;

/** Overview traces by content key, in memory and on disk, so that nothing is followed twice. */
export class Overviews {
  readonly #kept = new Map<string, OverviewTrace>();
  readonly #cache: ContentCache;

  constructor(cache: ContentCache) {
    this.#cache = cache;
  }

  /** null: nothing has been followed. */
  async get(key: string): Promise<OverviewTrace | null> {
    const known = this.#kept.get(key);
    if (known) return known;
    const read = await this.#cache.get(key, isOverview);
    // It may have been made anew while the disk was asked.
    const now = this.#kept.get(key) ?? read;
    if (now) this.put(key, now);
    return now;
  }

  /** Keeps a state in memory. */
  put(key: string, overview: OverviewTrace): void {
    this.#kept.delete(key);
    this.#kept.set(key, overview);
    for (const oldest of this.#kept.keys()) {
      if (this.#kept.size <= MOST_IN_MEMORY) break;
      this.#kept.delete(oldest);
    }
  }

  /** Writes what is in memory to the disk. */
  async store(key: string): Promise<void> {
    const overview = this.#kept.get(key);
    if (overview) await this.#cache.put(key, overview);
  }
}

function isOverview(value: unknown): value is OverviewTrace {
  if (typeof value !== 'object' || value === null) return false;
  const v = value as Record<string, unknown>;
  return (
    (v.unit === 'rad' || v.unit === 'px') &&
    ['time_s', 'angle', 'quality', 'x_px', 'y_px'].every((name) => v[name] instanceof Float64Array) &&
    v.frame_index instanceof Int32Array &&
    Array.isArray(v.refused) &&
    Array.isArray(v.covered)
  );
}
