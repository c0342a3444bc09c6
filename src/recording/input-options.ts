import { resolve } from 'node:path';

/** Containers that cameras and the programs next to them write. A format whitelist also keeps out scripts that name other files. */
const formats = 'mov,matroska,webm,avi';

/** Decoders of the pictures in such containers. */
const pictureDecoders = [
  ...[
    'h264',
    'hevc',
    'vp8',
    'vp9',
    'libvpx',
    'libvpx-vp9',
    'av1',
    'libdav1d',
    'libaom-av1',
    'mjpeg',
    'prores',
    'dnxhd',
  ],
  ...['mpeg4', 'h263', 'mpeg2video', 'dvvideo', 'ffv1', 'huffyuv', 'rawvideo', 'png'],
];

/** Decoders of the sound and the captions beside them: never used, but ffprobe prepares a decoder for every stream and gives up where it may not. */
const soundDecoders = [
  ...[
    'aac',
    'alac',
    'mp3float',
    'mp3',
    'mp2float',
    'mp2',
    'ac3',
    'eac3',
    'opus',
    'libopus',
    'vorbis',
    'libvorbis',
    'flac',
  ],
  ...['amrnb', 'amrwb', 'libopencore_amrnb', 'libopencore_amrwb', 'adpcm_ima_wav', 'adpcm_ima_qt', 'adpcm_ms'],
  ...['pcm_u8', 'pcm_s8', 'pcm_s16le', 'pcm_s16be', 'pcm_s24le', 'pcm_s24be', 'pcm_s32le', 'pcm_s32be'],
  ...['pcm_f32le', 'pcm_f32be', 'pcm_alaw', 'pcm_mulaw'],
];
const captionDecoders = ['mov_text', 'subrip', 'srt', 'ass', 'ssa', 'webvtt', 'text'];

/** Largest picture accepted: 8192 by 8192. */
const largestPicture_px = 8192 * 8192;

const boundedReading = [
  ['-protocol_whitelist', 'file'],
  ['-format_whitelist', formats],
  ['-max_pixels', String(largestPicture_px)],
  ['-max_streams', '16'],
  ['-probesize', '20000000'],
  ['-analyzeduration', '10000000'],
].flat();

/**
 * Options for ffmpeg before a file we do not trust: which protocols, containers and decoders may touch it, and how much of it may be
 * read to find out what it is.
 */
export const ffmpegInputOptions: readonly string[] = [
  ...boundedReading,
  ...['-codec_whitelist', pictureDecoders.join(',')],
];

/** The same for ffprobe. */
export const ffprobeInputOptions: readonly string[] = [
  ...boundedReading,
  ...['-codec_whitelist:v', pictureDecoders.join(',')],
  ...['-codec_whitelist:a', soundDecoders.join(',')],
  ...['-codec_whitelist:s', captionDecoders.join(',')],
];

/** The name under which a child is given a file: `file:` and the absolute path, so that no part of it reads as a protocol or an option. */
export function inputName(path: string): string {
  return `file:${resolve(path)}`;
}
