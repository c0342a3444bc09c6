import { readdirSync, readFileSync } from 'node:fs';

/** Process ids of the ffmpeg and ffprobe children of this process; null where the system has no /proc to look in. */
export function ffmpegChildren(): number[] | null {
  if (process.platform !== 'linux') return null;
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .filter((pid) => {
      try {
        // pid (name) state parent …
        const facts = /^\d+ \((.*)\) \S (\d+)/.exec(readFileSync(`/proc/${pid}/stat`, 'utf8'));
        return facts !== null && Number(facts[2]) === process.pid && /ff(mpeg|probe)/.test(facts[1] ?? '');
      } catch {
        return false;
      }
    })
    .map(Number);
}
