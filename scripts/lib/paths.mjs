import { createHash } from 'node:crypto';
import { chmodSync, mkdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The checkout that these scripts belong to. */
export const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** Everything that a running copy keeps: git-ignored, one per checkout. */
export const dataFolder = join(root, 'data');

/** Twelve hex digits that stand for this checkout's place. */
export const placeHash = createHash('sha256').update(root).digest('hex').slice(0, 12);

/** @param {string} folder made if missing, readable by its owner alone unless `open` */
export function ensureFolder(folder, open = false) {
	mkdirSync(folder, { recursive: true, mode: open ? 0o755 : 0o700 });
	if (open) chmodSync(folder, 0o755);
	return folder;
}
