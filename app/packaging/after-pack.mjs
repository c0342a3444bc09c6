// @ts-check
import { join } from 'node:path';
import { FuseV1Options, FuseVersion, flipFuses } from '@electron/fuses';

/**
 * What the packaged Electron may do, every fuse set on purpose: one that a later Electron adds fails the package until it is decided here.
 * @satisfies {import('@electron/fuses').FuseConfig}
 */
export const fuses = /** @type {const} */ ({
  version: FuseVersion.V1,
  strictlyRequireAllFuses: true,
  resetAdHocDarwinSignature: true,
  [FuseV1Options.RunAsNode]: false,
  // No cookies are kept, and the key store of the system isn't asked for.
  [FuseV1Options.EnableCookieEncryption]: false,
  [FuseV1Options.EnableNodeOptionsEnvironmentVariable]: false,
  [FuseV1Options.EnableNodeCliInspectArguments]: false,
  [FuseV1Options.EnableEmbeddedAsarIntegrityValidation]: true,
  [FuseV1Options.OnlyLoadAppFromAsar]: true,
  // There is one snapshot for both processes.
  [FuseV1Options.LoadBrowserProcessSpecificV8Snapshot]: false,
  [FuseV1Options.GrantFileProtocolExtraPrivileges]: false,
  [FuseV1Options.WasmTrapHandlers]: true,
});

/**
 * Where the executable of a packed program is.
 * @param {string} folder @param {string} platform electron-builder's name of it @param {string} product @param {string} executable
 */
export function executablePath(folder, platform, product, executable) {
  if (platform === 'darwin' || platform === 'mas') return join(folder, `${product}.app`);
  return join(folder, platform === 'win32' ? `${product}.exe` : executable);
}

/** Hook of electron-builder: sets the fuses, before the package is signed. @param {import('electron-builder').AfterPackContext} context */
export default async function afterPack(context) {
  const { appOutDir, electronPlatformName, packager } = context;
  const executable = 'executableName' in packager ? String(packager.executableName) : packager.appInfo.name;
  const path = executablePath(appOutDir, electronPlatformName, packager.appInfo.productFilename, executable);
  await flipFuses(path, fuses);
}
