import { runCommand } from './lib/commands.mjs';

/* `npm run bench`: how long the computing takes on this machine. */
await runCommand('bench');
