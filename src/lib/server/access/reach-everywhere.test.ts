import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

/*
 * A use case that forgets the reach of guests would show them a whole organisation. So every function of these
 * folders that takes a membership and asks the database must narrow its question by reach, or load the thing that it
 * is about through a function that does.
 */

const server = fileURLToPath(new URL('..', import.meta.url));
const folders = ['dossiers', 'calculations', 'evidence', 'reports', 'reviews', 'sharing', 'figures'];

/** Each narrows by reach itself: see guest-reach.db.test.ts. */
const loaders = [
	'findDossier',
	'getCalculation',
	'getVersion',
	'getRun',
	'getReport',
	'runsOf',
	'findComment',
	'holdReport'
];

/** `file function`, and why it need not. */
const exceptions: Readonly<Record<string, string>> = {
	'reports/change.ts nextNumber':
		'counts the numbers of the whole organisation, and is asked by authors alone',
	'reports/issue.ts authoriserOf': 'reads the name of the person who asks'
};

interface Found {
	key: string;
	text: string;
}

/** The top-level functions of a file, each from its head to the next one's. */
function functionsOf(file: string): Found[] {
	const text = readFileSync(file, 'utf8');
	const heads = [...text.matchAll(/^(?:export )?(?:async )?function (\w+)/gm)];
	return heads.map((head, at) => ({
		key: `${relative(server, file)} ${head[1]}`,
		text: text.slice(head.index, heads[at + 1]?.index)
	}));
}

function filesOf(folder: string): string[] {
	if (!existsSync(folder)) return [];
	return readdirSync(folder, { withFileTypes: true, recursive: true })
		.filter((entry) => entry.isFile() && entry.name.endsWith('.ts') && !entry.name.endsWith('.test.ts'))
		.map((entry) => join(entry.parentPath, entry.name))
		.filter((file) => !file.includes('/testing/'));
}

const asks = (text: string) =>
	/membership: (?:Membership\b|Pick<Membership)/.test(text) &&
	/(?<!Buffer|Array)\.(?:from|innerJoin|update|delete|execute|\$count)\(|\bquery\.\w+\.find/.test(text);
const narrows = (text: string) =>
	/\b(?:inReach|requireReach)\(\s*membership\b/.test(text) ||
	loaders.some((name) => new RegExp(`\\b${name}\\(`).test(text.replace(/^.*$/m, '')));

const asking = folders
	.flatMap((folder) => filesOf(join(server, folder)).flatMap(functionsOf))
	.filter(({ text }) => asks(text));

describe('reach', () => {
	it('is seen in functions that ask the database for a member', () => {
		expect(asking.length).toBeGreaterThan(25);
	});

	it.each(asking.filter(({ key }) => !(key in exceptions)))('narrows $key', ({ text }) => {
		expect(
			narrows(text),
			'Set inReach(membership, …dossierId) beside the condition on the organisation.'
		).toBe(true);
	});

	it.each(Object.keys(exceptions))('has a reason left to spare %s', (key) => {
		const found = asking.find((one) => one.key === key);
		expect(found, 'No such function any more: take it off the list.').toBeDefined();
		expect(narrows(found?.text ?? ''), 'It narrows by itself now: take it off the list.').toBe(false);
	});

	it('would notice a query that forgets it', () => {
		const forgetful = `export async function peek(membership: Membership, id: string, db: Queryable) {
			return db.select().from(dossiers).where(eq(dossiers.organisationId, membership.organisationId));
		}`;
		expect(asks(forgetful) && !narrows(forgetful)).toBe(true);
	});
});
