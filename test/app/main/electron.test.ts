import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { _electron } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import { electronRuntime } from '../../../app/loopback/electron-runtime.ts';

const choice = electronRuntime({ env: process.env, platform: process.platform, uid: process.getuid?.() ?? null });
if (!choice.use) console.log(`Electron is not tested here: ${choice.reason}.`);

describe.skipIf(!choice.use)('the program in Electron', () => {
  it('opens its window, which reaches the host and nothing else', async () => {
    if (!choice.use) return;
    const home = await mkdtemp(join(tmpdir(), 'needlebeat-electron-'));
    const { executable: executablePath, root } = choice;
    const env = { ...(process.env as Record<string, string>), NEEDLEBEAT_HOME: join(home, 'needlebeat') };
    const program = await _electron.launch({ executablePath, args: [root, `--user-data-dir=${home}`], env });
    try {
      const page = await program.firstWindow();
      expect(page.url()).toBe('app://needlebeat/index.html');
      const reach = await page.evaluate(() => ({
        node: typeof (globalThis as { require?: unknown }).require,
        bridge: Object.keys((globalThis as { needlebeat?: object }).needlebeat ?? {}).sort(),
      }));
      expect(reach).toEqual({ node: 'undefined', bridge: ['close', 'onClose', 'onMessage', 'send', 'tokenOf'] });
      await page
        .getByText(/demo session/i)
        .first()
        .waitFor();
    } finally {
      await program.close();
      await rm(home, { recursive: true, force: true });
    }
  });
});
