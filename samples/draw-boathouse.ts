// Draws the demo session anew: `node dist/samples/draw-boathouse.js [DIRECTORY]`; into samples/boathouse where none is given.
import { createRequire } from 'node:module';
import { boathouse } from './boathouse-bench.ts';
import { drawBench } from './draw-bench.ts';

const bundled = createRequire(import.meta.url)('@ffmpeg-installer/ffmpeg') as { path: string };
const directory = process.argv[2] ?? 'samples/boathouse';
let shown = 0;
await drawBench(boathouse, {
  ffmpegPath: bundled.path,
  directory,
  names: {
    session: 'boathouse.needlebeat.json',
    recording: 'boathouse.mp4',
    truth: 'boathouse.truth.json',
    frames: null,
  },
  onFrame: (frame, frames) => {
    if (frame - shown < 300 && frame !== 0) return;
    shown = frame;
    process.stderr.write(`frame ${frame} of ${frames}\n`);
  },
});
process.stderr.write(`drawn into ${directory}\n`);
