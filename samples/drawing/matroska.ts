/** Bytes of a number, most significant first, in a fixed count of bytes. */
function big(value: number, bytes: number): Uint8Array {
  const out = new Uint8Array(bytes);
  let rest = value;
  for (let i = bytes - 1; i >= 0; i--) {
    out[i] = rest % 256;
    rest = Math.floor(rest / 256);
  }
  return out;
}

function joined(parts: readonly Uint8Array[]): Uint8Array {
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

function idBytes(id: number): Uint8Array {
  return big(id, id > 0xffffff ? 4 : id > 0xffff ? 3 : id > 0xff ? 2 : 1);
}

/** Size field of eight bytes: a leading 01 and seven bytes of size (EBML, RFC 8794, section 4). */
function sizeBytes(size: number): Uint8Array {
  const out = big(size, 8);
  out[0] = 1;
  return out;
}

function element(id: number, content: Uint8Array): Uint8Array {
  return joined([idBytes(id), sizeBytes(content.length), content]);
}

const text = (value: string): Uint8Array => new TextEncoder().encode(value);
const number = (value: number): Uint8Array => big(value, 4);
const UNKNOWN_SIZE = Uint8Array.of(0x01, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff);

/**
 * Head of a live Matroska stream (RFC 9559) with one track of uncompressed yuv420p pictures, 8 bits or 10 in 16, and a clock
 * of microseconds.
 */
export function matroskaHead(width_px: number, height_px: number, tenBits: boolean): Uint8Array {
  const ebml = element(
    0x1a45dfa3,
    joined([element(0x4282, text('matroska')), element(0x4287, number(4)), element(0x4285, number(2))]),
  );
  const info = element(
    0x1549a966,
    joined([element(0x2ad7b1, number(1000)), element(0x4d80, text('drawn')), element(0x5741, text('drawn'))]),
  );
  // Colour spaces as four letters: I420, and for 10 bits the planar code "Y3", 11, 10.
  const letters = tenBits ? Uint8Array.of(0x59, 0x33, 0x0b, 0x0a) : text('I420');
  const video = element(
    0xe0,
    joined([element(0xb0, number(width_px)), element(0xba, number(height_px)), element(0x2eb524, letters)]),
  );
  const track = element(
    0xae,
    joined([
      element(0xd7, number(1)),
      element(0x73c5, number(1)),
      element(0x83, number(1)),
      element(0x86, text('V_UNCOMPRESSED')),
      video,
    ]),
  );
  return joined([ebml, idBytes(0x18538067), UNKNOWN_SIZE, info, element(0x1654ae6b, track)]);
}

/** What stands before the bytes of one picture: a cluster of its own with one simple block, shown at `time_us`. */
export function matroskaBlock(time_us: number, pictureBytes: number): Uint8Array {
  const clock = element(0xe7, big(time_us, 8));
  const blockHead = Uint8Array.of(0x81, 0, 0, 0x80);
  const block = joined([idBytes(0xa3), sizeBytes(blockHead.length + pictureBytes), blockHead]);
  const size = clock.length + block.length + pictureBytes;
  return joined([idBytes(0x1f43b675), sizeBytes(size), clock, block]);
}
