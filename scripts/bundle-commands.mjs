import { bundleCommand, commandNames } from './lib/commands.mjs';

/* `npm ci` calls this, so that the commands start at once. */
await Promise.all(commandNames().map(bundleCommand));
