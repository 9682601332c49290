import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const source = fileURLToPath(new URL('../../..', import.meta.url));

function importers(): string[] {
	return readdirSync(source, { withFileTypes: true, recursive: true })
		.filter((entry) => entry.isFile() && /\.(ts|svelte)$/.test(entry.name))
		.map((entry) => join(entry.parentPath, entry.name))
		.filter((file) => /from '[^']*organisations\/set-up'/.test(readFileSync(file, 'utf8')))
		.map((file) => file.slice(source.length));
}

describe('adding a member without asking them', () => {
	it('is for demo data and tests, and within the reach of no route', () => {
		const found = importers();
		expect(found).toContain('lib/server/demo/load.ts');
		expect(
			found.filter((file) => !file.startsWith('lib/server/demo/') && !file.endsWith('.test.ts'))
		).toEqual([]);
	});
});
