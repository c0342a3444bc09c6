import { type ParentPort, serveShell } from './host-process.ts';

/* Entry of the utility process; Electron puts the port to the shell on `process`. */
const { parentPort } = process as NodeJS.Process & { parentPort?: ParentPort };
if (parentPort) serveShell(parentPort, (code) => process.exit(code));
