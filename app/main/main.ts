import { app } from 'electron';
import { startShell } from './desktop-shell.ts';
import { denyEverywhere } from './navigation.ts';
import { registerPageScheme } from './page-protocol.ts';

/* Entry of the desktop program. What must happen before Electron is ready happens here, at once. */
app.enableSandbox();
registerPageScheme();
denyEverywhere();

if (app.requestSingleInstanceLock({ arguments: process.argv.slice(1) })) {
  startShell().catch((error: unknown) => {
    process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
    app.exit(1);
  });
} else app.quit();
