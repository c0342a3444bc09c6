/*
 * One message as one binary frame, for transports that carry bytes only (the WebSocket):
 *   uint32 little endian: length of the header in bytes; header: JSON in UTF-8; padding to 8; attachments, each padded to 8.
 * A typed array stands in the header as {"$bytes": [kind, offset, length in bytes]}; offsets count from the first attachment.
 */

type Columns = Uint8Array | Int32Array | Float64Array;

const kinds = { u8: Uint8Array, i32: Int32Array, f64: Float64Array } as const;
type Kind = keyof typeof kinds;

const KEY = '$bytes';
const pad = (n: number): number => (n + 7) & ~7;

function kindOf(value: unknown): Kind | null {
  if (value instanceof Uint8Array) return 'u8';
  if (value instanceof Int32Array) return 'i32';
  if (value instanceof Float64Array) return 'f64';
  return null;
}

/** Packs a message into one frame. NaN and infinities outside of typed arrays become null, as in JSON. */
export function encodeFrame(message: unknown): Uint8Array<ArrayBuffer> {
  const attachments: Columns[] = [];
  let size = 0;
  const header = new TextEncoder().encode(
    JSON.stringify(message, (_key, value: unknown) => {
      const kind = kindOf(value);
      if (kind === null) return value;
      const column = value as Columns;
      const reference = { [KEY]: [kind, size, column.byteLength] };
      attachments.push(column);
      size = pad(size + column.byteLength);
      return reference;
    }),
  );
  const start = pad(4 + header.length);
  const frame = new Uint8Array(start + size);
  new DataView(frame.buffer).setUint32(0, header.length, true);
  frame.set(header, 4);
  let at = start;
  for (const column of attachments) {
    frame.set(new Uint8Array(column.buffer, column.byteOffset, column.byteLength), at);
    at = pad(at + column.byteLength);
  }
  return frame;
}

/**
 * Unpacks a frame. The typed arrays of the result are views of one copy of it.
 * @throws RangeError where the frame is cut short or refers to bytes that it doesn't hold.
 * @throws SyntaxError where its header isn't JSON.
 */
export function decodeFrame(bytes: Uint8Array): unknown {
  const frame = bytes.byteOffset % 8 === 0 ? bytes : new Uint8Array(bytes);
  if (frame.byteLength < 4) throw new RangeError('frame of fewer than 4 bytes');
  const headerLength = new DataView(frame.buffer, frame.byteOffset, frame.byteLength).getUint32(0, true);
  const start = pad(4 + headerLength);
  if (4 + headerLength > frame.byteLength) throw new RangeError('frame shorter than its header');
  const header = new TextDecoder('utf-8', { fatal: true }).decode(frame.subarray(4, 4 + headerLength));
  return JSON.parse(header, (key, value: unknown) => {
    if (key === '__proto__') return undefined;
    return isReference(value) ? column(frame, start, value[KEY]) : value;
  });
}

type Reference = readonly [Kind, number, number];

function isReference(value: unknown): value is { [KEY]: Reference } {
  if (typeof value !== 'object' || value === null || !Object.hasOwn(value, KEY)) return false;
  const reference = (value as Record<string, unknown>)[KEY];
  return (
    Array.isArray(reference) &&
    reference.length === 3 &&
    typeof reference[0] === 'string' &&
    Object.hasOwn(kinds, reference[0]) &&
    Number.isSafeInteger(reference[1]) &&
    Number.isSafeInteger(reference[2])
  );
}

function column(frame: Uint8Array, start: number, [kind, offset, length]: Reference): Columns {
  const Type = kinds[kind];
  if (offset < 0 || length < 0 || offset % 8 !== 0 || length % Type.BYTES_PER_ELEMENT !== 0) {
    throw new RangeError('attachment out of step');
  }
  if (start + offset + length > frame.byteLength) throw new RangeError('attachment beyond the end of the frame');
  return new Type(frame.buffer as ArrayBuffer, frame.byteOffset + start + offset, length / Type.BYTES_PER_ELEMENT);
}
