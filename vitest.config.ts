import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    include: ['test/**/*.test.ts', 'test/**/*.test.tsx'],
    testTimeout: 120_000,
    hookTimeout: 120_000,
    // What is waited for comes within a moment here, but not on every machine.
    expect: { poll: { timeout: 60_000 } },
    // Files run two at a time: the machine that has to pass this has two cores, and ffmpeg is a process of its own.
    maxWorkers: 2,
    pool: 'forks',
  },
});
