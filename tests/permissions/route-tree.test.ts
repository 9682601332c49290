import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { gapsBetween, readRouteTree } from './route-tree';

/* The matrix is as good as the list that it is made from. */

let folder: string;

function write(files: Record<string, string>): void {
	for (const [name, text] of Object.entries(files)) {
		const file = join(folder, name);
		mkdirSync(dirname(file), { recursive: true });
		writeFileSync(file, text);
	}
}

const found = () => readRouteTree(folder).map(({ route, what }) => `${route} ${what}`);

beforeEach(() => {
	folder = mkdtempSync(join(tmpdir(), 'noonmark-routes-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

describe('the reader of routes', () => {
	it('finds pages, loads, actions and methods by their exports', () => {
		write({
			'+layout.svelte': '',
			'+page.svelte': '',
			'(app)/+layout.server.ts': 'export const load: LayoutServerLoad = async () => ({});',
			'(app)/things/[id=uuid]/+page.svelte': '',
			'(app)/things/[id=uuid]/+page.server.ts': `
				import type { Actions } from './$types';
				export type Given = { a: number };
				export async function load() { return {}; }
				export const actions = { default: async () => {}, 'take away': async () => {}, undo() {} } satisfies Actions;`,
			'(app)/things/[id=uuid]/+error.svelte': '',
			'(app)/api/+server.ts': `
				const PUT = async () => new Response();
				export const prerender = false;
				export const GET = async () => new Response(), DELETE = GET;
				export { PUT };`,
			'(app)/api/helper.ts': 'export const POST = 1;'
		});
		expect(found()).toEqual([
			'/ page',
			'/(app) layout',
			'/(app)/api GET',
			'/(app)/api DELETE',
			'/(app)/api PUT',
			'/(app)/things/[id=uuid] page',
			'/(app)/things/[id=uuid] action default',
			'/(app)/things/[id=uuid] action take away',
			'/(app)/things/[id=uuid] action undo'
		]);
	});

	it('tells where in its branch a load stands: error pages take a place as layouts do', () => {
		write({
			'(app)/+layout.server.ts': 'export const load = () => ({});',
			'(app)/a/+page.server.ts': 'export const load = () => ({});',
			'(app)/b/+error.svelte': '',
			'(app)/b/+page.svelte': ''
		});
		const depths = readRouteTree(folder).map(({ route, hasLoad, depth }) => [route, hasLoad, depth]);
		expect(depths).toEqual([
			['/(app)', true, 1],
			['/(app)/a', true, 2],
			['/(app)/b', false, 3]
		]);
	});

	it.each([
		['actions made elsewhere', '+page.server.ts', 'export const actions = makeActions();'],
		['actions spread in', '+page.server.ts', 'export const actions = { ...others };'],
		['actions without a plain name', '+page.server.ts', 'export const actions = { [name]: () => {} };'],
		['everything of another file', '+server.ts', "export * from './other';"],
		['exports taken apart', '+server.ts', 'export const { GET, POST } = handlers;'],
		['a load that runs in the browser as well', '+page.ts', 'export const load = () => ({});'],
		['a page that leaves layouts out', '+page@.svelte', '']
	])('does not guess at %s', (_what, name, text) => {
		write({ [name]: text });
		expect(found).toThrow();
	});
});

describe('the comparison of routes and expectations', () => {
	const item = (route: string, what: string) => ({ route, what });

	it('finds a route without an expectation, an expectation without a route, and one given twice', () => {
		expect(gapsBetween([item('/a', 'page')], [item('/a', 'page')])).toEqual([]);
		expect(gapsBetween([item('/a', 'page'), item('/a', 'action delete')], [item('/a', 'page')])).toEqual([
			'no expectation for /a action delete'
		]);
		expect(gapsBetween([item('/a', 'GET')], [item('/a', 'GET'), item('/b', 'GET')])).toEqual([
			'no route for the expectation /b GET'
		]);
		expect(gapsBetween([item('/a', 'GET')], [item('/a', 'GET'), item('/a', 'GET')])).toEqual([
			'two expectations for /a GET'
		]);
	});
});
