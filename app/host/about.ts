import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { programVersion } from '../../src/report/program.ts';
import type { AboutFacts } from '../contract.ts';

/** The cautions that README and About show. */
export const cautions = [
  "Coils get hot at high current: stay within the winding's rating and watch the supply's limit.",
  'Strong magnets pinch fingers and disturb pacemakers, cards and instruments.',
  "Follow the laboratory's own rules and local codes; results are no substitute for a calibration by an accredited laboratory where one is required.",
];

const sources = {
  FFMPEG_PATH: 'named by FFMPEG_PATH',
  'ffmpeg-static': 'package ffmpeg-static',
  PATH: 'installed on this computer',
  bundled: 'comes with Needlebeat',
} as const;

/** What About shows. @param runtime names and versions of what the program runs on. */
export async function aboutFacts(env: NodeJS.ProcessEnv, runtime: AboutFacts['runtime']): Promise<AboutFacts> {
  const tools = await findFfmpeg(env).catch(() => null);
  return {
    program: 'Needlebeat',
    version: programVersion,
    runtime,
    ffmpeg: tools && { version: tools.version.text, source: sources[tools.source] },
    ffprobe: tools && { version: tools.ffprobeVersion.text, source: '' },
  };
}
