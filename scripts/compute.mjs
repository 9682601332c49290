import { runCommand } from './lib/commands.mjs';

/* `npm run -s compute -- FILE.json|- [--threads N]` */
await runCommand('compute');
