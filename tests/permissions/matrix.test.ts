import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ofGuest, ofMember } from './change-of-rights';
import { digestOfTables, untilQuiet } from './digest';
import { isAllowed, isChange, isEndpoint, subjects, type Entry } from './entry';
import { entries } from './expectations';
import { asGet, asVariant, variantsFor } from './foreign-origin';
import { closeConnections, inParallel } from './http';
import { bare, hasTwins, leaks, probesOf, twinsOf, type Probe } from './probes';
import { asRequest, outcomeOf, sendAs } from './requests';
import { gapsBetween, readRouteTree, type RouteItem } from './route-tree';
import { makeWorld, type World } from './world';

/*
 * Every page, load, form action and endpoint of the route tree, asked for by every kind of person, with the ids of
 * their own organisation, of a foreign one, and of one thing there and the rest here.
 *
 * First all that must change nothing: reading, whatever is refused, and every change asked for from another origin. The
 * tables are compared before and after. Then what is allowed to change something, each on a copy of its own.
 */

const width = 8;
const began = Date.now();
const tree = readRouteTree(join(import.meta.dirname, '../../src/routes'));

const keyOf = ({ route, what }: { route: string; what: string }) => `${route} ${what}`;
const items = new Map(tree.map((item) => [keyOf(item), item]));
/** Those of routes that are there; a gap has a test of its own. */
const askable = entries.filter((entry) => items.has(keyOf(entry)));
const itemOf = (entry: Entry) => items.get(keyOf(entry)) as RouteItem;

type Cells = Record<string, string>;
const wanted = new Map<string, Cells>();
const got = new Map<string, Cells>();
const leaked = new Map<string, string[]>();
const twins = new Map<string, Cells>();
const crossing = { wanted: new Map<string, Cells>(), got: new Map<string, Cells>() };
/** Digests of answers: see `bare`. */
const bares = new Map<string, string>();
let requests = 0;
let world: World;
let before: Record<string, string>;
let after: Record<string, string>;

function put(into: Map<string, Cells>, entry: Entry, cell: string, value: string): void {
	const cells = into.get(keyOf(entry)) ?? {};
	if (cells[cell] !== undefined) throw new Error(`Two requests are called "${cell}" of ${keyOf(entry)}.`);
	into.set(keyOf(entry), { ...cells, [cell]: value });
}

async function ask(probe: Probe): Promise<void> {
	const { entry, cell } = probe;
	put(wanted, entry, cell, probe.expected);
	const found = await probe.run().catch((error: unknown) => ({
		outcome: error instanceof Error ? error.message : String(error),
		answer: undefined
	}));
	requests++;
	put(got, entry, cell, found.outcome);
	if (found.answer !== undefined) bares.set(`${keyOf(entry)} ${cell}`, bare(found.answer));
	const shown = found.answer === undefined ? [] : leaks(probe, found.answer);
	if (shown.length > 0)
		leaked.set(keyOf(entry), [...(leaked.get(keyOf(entry)) ?? []), `${cell}: ${shown.join(', ')}`]);
}

async function askTwins(entry: Entry): Promise<void> {
	for (const twin of twinsOf(world, entry, itemOf(entry))) {
		const { outcome, answer } = await twin.run();
		requests++;
		const same = bare(answer) === bares.get(`${keyOf(entry)} ${twin.cell}`);
		put(twins, entry, twin.cell, same ? 'alike' : `what nobody has: ${outcome}`);
	}
}

async function askFromElsewhere(entry: Entry): Promise<void> {
	// Somebody signed in who may: a foreign page that is refused must be refused for where it comes from.
	const signedIn = (['author', ...subjects] as const).filter((one) => one !== 'stranger');
	const subject = signedIn.find((one) => isAllowed(entry, one, 'own')) ?? 'author';
	const session = world.sessions[subject];
	const sent = asRequest(entry, { ...entry.sample, ...world.own }, session);
	for (const variant of variantsFor(world.address)) {
		const answer = await sendAs(session, asVariant(sent, variant));
		requests++;
		put(crossing.wanted, entry, variant.name, entry.fromElsewhere?.answer ?? variant.answer);
		put(crossing.got, entry, variant.name, outcomeOf(answer, world.address, world.own));
	}
	const answer = await sendAs(session, asGet(sent));
	requests++;
	// An endpoint has no such method; a page shows itself, or whatever its load says: what counts is that nothing changes.
	const alone = isEndpoint(entry) && !items.has(keyOf({ route: entry.route, what: 'GET' }));
	put(crossing.wanted, entry, 'by GET', alone ? '405' : 'no change');
	put(crossing.got, entry, 'by GET', alone || answer.status >= 500 ? String(answer.status) : 'no change');
}

beforeAll(async () => {
	const address = process.env.E2E_ADDRESS;
	const database = process.env.SERVICE_DATABASE;
	if (address === undefined || database === undefined)
		throw new Error('E2E_ADDRESS or SERVICE_DATABASE is not set; run these by npm test -- permissions');
	world = await makeWorld(address, database);
	const ready = Date.now();
	const probes = askable.flatMap((entry) => probesOf(world, entry, itemOf(entry)));
	before = await digestOfTables(world.pool);
	const still = probes.filter(({ changes }) => !changes);
	await inParallel(still, width, ask);
	await inParallel(askable, width, askTwins);
	await inParallel(askable.filter(isChange), width, askFromElsewhere);
	after = await digestOfTables(world.pool);
	const looked = Date.now();
	const changing = probes.filter(({ changes }) => changes);
	await inParallel(
		changing.filter(({ entry }) => entry.last !== true),
		width,
		ask
	);
	await inParallel(
		changing.filter(({ entry }) => entry.last === true),
		width,
		ask
	);
	await untilQuiet(world.pool);

	const routes = new Set(tree.map(({ route }) => route)).size;
	const seconds = (from: number, to: number) => ((to - from) / 1000).toFixed(0);
	console.log(
		[
			`Permission matrix: ${routes} routes with ${tree.length} pages, loads, actions and endpoints;`,
			`${askable.length} expectations x ${subjects.length} kinds of people x own and foreign organisation;`,
			`${requests} requests, ${changing.length} of them allowed to change something.`,
			`Fixtures ${seconds(began, ready)} s, still ${seconds(ready, looked)} s, changes ${seconds(looked, Date.now())} s.`
		].join(' ')
	);
}, 300_000);

afterAll(async () => {
	closeConnections();
	await world?.close();
});

describe('the route tree', () => {
	it('has an expectation for each thing that can be asked of it, and no other', () => {
		expect(gapsBetween(tree, entries)).toEqual([]);
	});
});

for (const entry of askable) {
	const key = keyOf(entry);
	describe(key, () => {
		it('answers each person as their rights say', () => {
			expect(got.get(key)).toEqual(wanted.get(key));
		});

		it('shows nobody what is not theirs to see', () => {
			expect(leaked.get(key) ?? []).toEqual([]);
		});

		if (hasTwins(entry)) {
			it('answers alike for what is foreign and for what nobody has', () => {
				const cells = Object.entries(twins.get(key) ?? {});
				expect(cells.length).toBeGreaterThan(0);
				expect(cells.filter(([, value]) => value !== 'alike')).toEqual([]);
			});
		}

		if (isChange(entry)) {
			it('takes no change from another origin', () => {
				expect(crossing.got.get(key)).toEqual(crossing.wanted.get(key));
			});
		}
	});
}

describe('what must change nothing', () => {
	it('changed nothing: reading, whatever was refused, and whatever came from elsewhere', () => {
		expect(Object.keys(before).length).toBeGreaterThan(20);
		expect(after).toEqual(before);
	});
});

describe('rights that change', () => {
	// A save that started from another version is refused for that, once it is let through.
	const asAuthor = { reading: '200', asking: '200', saving: '409' };
	const asReader = { reading: '200', asking: '200', saving: '403' };
	const asNobody = { reading: '303 /organisation/new', asking: '404', saving: '303 /organisation/new' };

	it('count from the next request on, in a session that is open already', async () => {
		expect(await ofMember(world)).toEqual([asAuthor, asReader, asNobody]);
		expect(await ofGuest(world)).toEqual([asReader, asNobody]);
	});
});
