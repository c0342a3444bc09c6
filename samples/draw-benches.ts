// Draws benches that differ from the demo's, each with session, truth and true angles: `node dist/samples/draw-benches.js DIRECTORY [NAME…]`.
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { benches } from './benches/benches.ts';
import { drawBench } from './draw-bench.ts';

const [directory, ...wanted] = process.argv.slice(2);
const unknown = wanted.filter((name) => !benches.some((bench) => bench.name === name));
if (directory === undefined || unknown.length > 0) {
  process.stderr.write(
    `${unknown.length > 0 ? `No bench is called ${unknown.join(', ')}.` : 'Into which folder?'} Benches: ${benches.map((bench) => bench.name).join(', ')}.\n`,
  );
  process.exit(2);
}
const bundled = createRequire(import.meta.url)('@ffmpeg-installer/ffmpeg') as { path: string };
for (const bench of benches) {
  if (wanted.length > 0 && !wanted.includes(bench.name)) continue;
  const began = performance.now();
  const into = join(directory, bench.name);
  await drawBench(bench, {
    ffmpegPath: bundled.path,
    directory: into,
    names: {
      session: 'session.needlebeat.json',
      recording: `${bench.name}.${bench.file.extension}`,
      truth: 'truth.json',
      frames: 'frames.csv',
    },
  });
  process.stderr.write(`${into}: drawn in ${((performance.now() - began) / 1000).toFixed(0)} s\n`);
}
