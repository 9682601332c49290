import { existsSync, readFileSync } from 'node:fs';
import { expect, it } from 'vitest';

/* A map that names folders which are gone is worse than none. */

const places = /`((?:src|scripts|tests|report-templates|drizzle|static|\.ci)(?:\/[^`\s]*)?)`/g;

it.each(['README.md', 'DEVELOPERS.md'])('every path that %s names is there', (file) => {
	const named = [...readFileSync(file, 'utf8').matchAll(places)].map(([, path = '']) => path);
	const missing = named.filter((path) => !path.includes('…') && !existsSync(path));
	expect(missing).toEqual([]);
	expect(named.length).toBeGreaterThanOrEqual(file === 'DEVELOPERS.md' ? 20 : 0);
});

it('the picture of the README is there', () => {
	const picture = /!\[[^\]]*\]\(([^)]+)\)/.exec(readFileSync('README.md', 'utf8'))?.[1];
	expect(picture).toBeDefined();
	expect(existsSync(picture ?? '')).toBe(true);
});

it('every script of package.json runs a file that is there', () => {
	const { scripts } = JSON.parse(readFileSync('package.json', 'utf8')) as { scripts: Record<string, string> };
	const files = Object.values(scripts).flatMap((line) => line.match(/scripts\/[\w-]+\.mjs/g) ?? []);
	expect(files.length).toBeGreaterThan(5);
	expect(files.filter((path) => !existsSync(path))).toEqual([]);
});
