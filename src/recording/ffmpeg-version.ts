/** What a build of ffmpeg or ffprobe says about itself. */
export interface FfmpegVersion {
  /** As printed, e.g. `5.1.9` or `N-47683-g0e8eb07980-static`. */
  readonly text: string;
  /** Major number of a release, null for a development build. */
  readonly major: number | null;
  /** Version of its libavcodec (major, minor), [0, 0] where it isn't printed: it only ever grows, in releases and development builds alike. */
  readonly libavcodec: readonly [number, number];
  /** Last year of its copyright line, 0 where it isn't printed. */
  readonly year: number;
}

/** Reads what `ffmpeg -version` or `ffprobe -version` prints; null where it is the output of something else. */
export function parseFfmpegVersion(output: string): FfmpegVersion | null {
  const text = /^ff(?:mpeg|probe) version (\S+)/m.exec(output)?.[1];
  if (text === undefined) return null;
  const major = /^n?(\d+)\.\d/.exec(text)?.[1];
  const codec = /^libavcodec\s+(\d+)\.\s*(\d+)/m.exec(output);
  const year = /Copyright \(c\) (?:\d{4}-)?(\d{4})/.exec(output)?.[1];
  return {
    text,
    major: major === undefined ? null : Number(major),
    libavcodec: [Number(codec?.[1] ?? 0), Number(codec?.[2] ?? 0)],
    year: Number(year ?? 0),
  };
}

/**
 * Whether `a` is newer code than `b`. The version of libavcodec decides: a development build has no release number, and
 * a distribution's rebuild of an old release carries the year of the rebuild. The year decides only between equals.
 */
export function isNewer(a: FfmpegVersion, b: FfmpegVersion): boolean {
  const difference = a.libavcodec[0] - b.libavcodec[0] || a.libavcodec[1] - b.libavcodec[1] || a.year - b.year;
  return difference > 0;
}

/** How this build is told to hand on every frame as it is, none doubled or dropped: `-fps_mode` came with libavcodec 59.37 (ffmpeg 5.1). */
export function passthroughOption(version: FfmpegVersion): readonly string[] {
  const [major, minor] = version.libavcodec;
  const knowsFpsMode = major > 59 || (major === 59 && minor >= 37);
  return [knowsFpsMode ? '-fps_mode' : '-vsync', 'passthrough'];
}
