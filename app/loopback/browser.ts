import { spawn } from 'node:child_process';

/**
 * Opens an address in the user's browser.
 * @returns whether the system's opener could be started; what the browser then does nobody tells.
 */
export function openBrowser(address: string, platform: NodeJS.Platform): Promise<boolean> {
  const [program, args] = opener(address, platform);
  return new Promise((resolve) => {
    const child = spawn(program, args, { detached: true, stdio: 'ignore', windowsHide: true });
    child.once('error', () => resolve(false));
    child.once('spawn', () => {
      child.unref();
      resolve(true);
    });
  });
}

function opener(address: string, platform: NodeJS.Platform): [string, string[]] {
  if (platform === 'darwin') return ['open', [address]];
  // No shell: the address reaches the opener as it is.
  if (platform === 'win32') return ['rundll32', ['url.dll,FileProtocolHandler', address]];
  return ['xdg-open', [address]];
}
