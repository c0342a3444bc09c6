/** A slot that a picture has been put into; `memory` only the first time, for the worker to keep under the slot's number. */
export interface FilledSlot {
  readonly slot: number;
  readonly memory: SharedArrayBuffer | null;
}

/**
 * Memory shared with one worker, a slot a picture, used over and over: a buffer of its own for every frame would keep the
 * garbage collectors of both threads busier than following the bar does.
 */
export class PictureSlots {
  readonly #bytes = new Map<number, Uint8Array>();
  readonly #free: number[] = [];
  #next = 0;

  /** Copies a picture's bytes into a free slot of their size, or into a new one. */
  fill(picture: Uint8Array): FilledSlot {
    const at = this.#free.findLastIndex((slot) => this.#bytes.get(slot)?.byteLength === picture.byteLength);
    if (at >= 0) {
      const [slot = 0] = this.#free.splice(at, 1);
      this.#bytes.get(slot)?.set(picture);
      return { slot, memory: null };
    }
    const slot = this.#next++;
    const memory = new SharedArrayBuffer(picture.byteLength);
    const bytes = new Uint8Array(memory);
    bytes.set(picture);
    this.#bytes.set(slot, bytes);
    return { slot, memory };
  }

  /** Takes slots back whose pictures the worker no longer needs. */
  takeBack(slots: readonly number[]): void {
    this.#free.push(...slots);
  }

  /** Gives up all free slots, as when pictures of another size are to come; their numbers, for the worker to do the same. */
  giveUpFree(): readonly number[] {
    const given = this.#free.splice(0);
    for (const slot of given) this.#bytes.delete(slot);
    return given;
  }

  /** Whether a free slot fits pictures of this size. */
  fits(byteLength: number): boolean {
    return this.#free.some((slot) => this.#bytes.get(slot)?.byteLength === byteLength);
  }
}
