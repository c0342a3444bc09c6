import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { FuseV1Options } from '@electron/fuses';
import { Ajv } from 'ajv';
import { describe, expect, it } from 'vitest';
import { executablePath, fuses } from '../../../app/packaging/after-pack.mjs';

const root = new URL('../../../', import.meta.url).pathname;
const require = createRequire(import.meta.url);
const { load } = require('js-yaml') as { load: (text: string) => unknown };

interface System {
  readonly target: string[];
  readonly files: string[];
  readonly icon: string;
}
interface Config {
  readonly files: string[];
  readonly asarUnpack: string[];
  readonly afterPack: string;
  readonly asar: boolean;
  readonly directories: { buildResources: string };
  readonly linux: System;
  readonly win: System;
  readonly mac: System;
}
const config = load(readFileSync(join(root, 'electron-builder.yml'), 'utf8')) as Config;

describe('electron-builder.yml', () => {
  it('holds nothing that electron-builder’s own scheme doesn’t know', () => {
    const scheme = require('app-builder-lib/scheme.json') as object;
    const validate = new Ajv({ strict: false, allErrors: true }).compile(scheme);
    expect(validate(config), JSON.stringify(validate.errors, null, 1)).toBe(true);
    expect(validate({ ...config, asra: true })).toBe(false);
  });

  it('has the program’s own icon on every system, as large as each of them asks for', () => {
    for (const system of [config.linux, config.win, config.mac]) {
      const png = readFileSync(join(root, config.directories.buildResources, system.icon));
      expect(png.subarray(1, 4).toString()).toBe('PNG');
      // Width and height stand first in the header chunk (PNG specification, section 11.2.2).
      expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual([1024, 1024]);
    }
  });

  it('makes the packages that are promised', () => {
    expect(config.linux.target).toEqual(['AppImage', 'deb']);
    expect(config.win.target).toEqual(['nsis']);
    expect(config.mac.target).toEqual(['dmg']);
  });

  it('names files that are there, and the entry that package.json names is among them', () => {
    const { main } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { main: string };
    const places = [...config.files, ...config.asarUnpack]
      .filter((f) => !f.startsWith('!'))
      .map((f) => f.replace(/\/\*\*.*$/, ''));
    for (const place of [...places, config.afterPack]) expect(existsSync(join(root, place)), place).toBe(true);
    const needed = [
      main,
      'dist/app/main/host-entry.js',
      'dist/app/preload/preload.cjs',
      'dist/window/index.html',
      'dist/src/tracking/worker.js',
      'dist/app/host/calculator-worker.js',
    ];
    for (const file of needed) {
      expect(existsSync(join(root, file)), file).toBe(true);
      expect(
        config.files.some((f) => f.endsWith('/**') && file.startsWith(f.slice(0, -2))),
        file,
      ).toBe(true);
    }
  });

  it('leaves other systems’ ffmpeg out and unpacks its own and what it reads', () => {
    const others = { linux: ['darwin', 'win32'], win: ['darwin', 'linux'], mac: ['linux', 'win32'] } as const;
    for (const [system, left] of Object.entries(others)) {
      const { files } = config[system as keyof typeof others];
      for (const tool of ['@ffmpeg-installer', '@ffprobe-installer']) {
        const rule = files.find((f) => f.startsWith(`!node_modules/${tool}/{`)) ?? '';
        expect(
          rule
            .match(/\{(.*)\}/)?.[1]
            ?.split(',')
            .sort(),
        ).toEqual([...left]);
      }
    }
    for (const part of ['@ffmpeg-installer', '@ffprobe-installer', 'opencv-wasm', 'samples']) {
      expect(
        config.asarUnpack.some((place) => place.includes(part)),
        part,
      ).toBe(true);
    }
    expect(config.asar).toBe(true);
  });
});

describe('fuses', () => {
  it('are all set on purpose', () => {
    const names = Object.values(FuseV1Options).filter((v): v is FuseV1Options => typeof v === 'number');
    expect(names.length).toBeGreaterThan(7);
    for (const fuse of names) expect(typeof fuses[fuse], FuseV1Options[fuse]).toBe('boolean');
    expect(fuses.strictlyRequireAllFuses).toBe(true);
    expect(fuses[FuseV1Options.RunAsNode]).toBe(false);
    expect(fuses[FuseV1Options.EnableNodeOptionsEnvironmentVariable]).toBe(false);
    expect(fuses[FuseV1Options.EnableNodeCliInspectArguments]).toBe(false);
    expect(fuses[FuseV1Options.OnlyLoadAppFromAsar]).toBe(true);
    expect(fuses[FuseV1Options.EnableEmbeddedAsarIntegrityValidation]).toBe(true);
    expect(fuses[FuseV1Options.GrantFileProtocolExtraPrivileges]).toBe(false);
  });

  it('are set in the executable of each system', () => {
    expect(executablePath('/o', 'linux', 'Needlebeat', 'needlebeat')).toBe('/o/needlebeat');
    expect(executablePath('/o', 'win32', 'Needlebeat', 'needlebeat')).toBe('/o/Needlebeat.exe');
    expect(executablePath('/o', 'darwin', 'Needlebeat', 'needlebeat')).toBe('/o/Needlebeat.app');
  });
});
