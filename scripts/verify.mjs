import { runCommand } from './lib/commands.mjs';

/* `npm run -s verify -- report.pdf [--root FILE]` */
await runCommand('verify');
