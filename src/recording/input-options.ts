import { resolve } from 'node:path';

/** Containers that cameras and the programs next to them write. A format whitelist also keeps out scripts that name other files. */
const formats = 'mov,matroska,webm,avi';

/** Decoders of the pictures in such containers. Sound is never decoded. */
const codecs =
  'h264,hevc,vp8,vp9,libvpx,libvpx-vp9,av1,libdav1d,libaom-av1,mjpeg,prores,dnxhd,mpeg4,h263,mpeg2video,dvvideo,ffv1,huffyuv,rawvideo,png';

/** Largest picture accepted: 8192 by 8192. */
const largestPicture_px = 8192 * 8192;

/**
 * Options that ffmpeg and ffprobe both need before a file we do not trust: which protocols, containers and decoders may touch it, and
 * how much of it may be read to find out what it is.
 */
export const untrustedInputOptions: readonly string[] = [
  ['-protocol_whitelist', 'file'],
  ['-format_whitelist', formats],
  ['-codec_whitelist', codecs],
  ['-max_pixels', String(largestPicture_px)],
  ['-max_streams', '16'],
  ['-probesize', '20000000'],
  ['-analyzeduration', '10000000'],
].flat();

/** The name under which a child is given a file: `file:` and the absolute path, so that no part of it reads as a protocol or an option. */
export function inputName(path: string): string {
  return `file:${resolve(path)}`;
}
