import { createHash } from 'node:crypto';
import { hashToken } from '$lib/server/accounts/tokens';
import {
	expected,
	isAllowed,
	isChange,
	namesOf,
	subjects,
	type Entry,
	type Kit,
	type Subject,
	type Values,
	type Whose
} from './entry';
import type { Answer } from './http';
import { asRequest, loadAlone, outcomeOf, outcomeOfLoad, sendAs } from './requests';
import type { RouteItem } from './route-tree';
import { markers, type Marker, type World } from './world';

/* Every request of the matrix, each with what it is to be answered. */

export interface Probe {
	entry: Entry;
	subject: Subject;
	/** "author, own": a cell of the entry's row. */
	cell: string;
	/** Exactly one outcome. */
	expected: string;
	/** Sends it and says what came back. */
	run: () => Promise<{ outcome: string; answer: Answer }>;
	/** It is let through to change something, so it needs a copy of its own. */
	changes: boolean;
}

/** Words that somebody must not be shown, by the dossiers and lists that they may not see. */
function hiddenFrom(entry: Entry, subject: Subject): Marker[] {
	const reads: Partial<Record<Subject, Marker[]>> = {
		owner: ['own', 'elsewhere', 'member'],
		author: ['own', 'elsewhere', 'member'],
		reviewer: ['own', 'elsewhere', 'member'],
		reader: ['own', 'elsewhere', 'member'],
		guest: ['own'],
		'guest elsewhere': ['elsewhere']
	};
	const shown = new Set<string>([...(reads[subject] ?? []), ...(entry.shows ?? [])]);
	return (Object.keys(markers) as Marker[]).filter((marker) => !shown.has(marker));
}

/** Marked words in an answer that its reader must not see. */
export function leaks({ entry, subject }: Probe, { body, headers }: Answer): string[] {
	if (/pdf|png|octet-stream/.test(headers['content-type'] ?? '')) return [];
	const text = body.toString('utf8');
	return hiddenFrom(entry, subject)
		.filter((marker) => text.includes(markers[marker]))
		.map((marker) => `shows "${markers[marker]}" (${marker})`);
}

/** Data of a load tell where they redirect to, and no more. */
function ofLoad(outcome: string): string {
	return outcome.replace(/^30\d/, '30x');
}

type Whole = Pick<Probe, 'entry' | 'subject' | 'cell' | 'expected'>;

/** Sends an entry's request with given values; a request that changes something, on a copy. */
function probe(world: World, given: Whole, values: Values, item: RouteItem): Probe {
	const { entry, subject } = given;
	const changes = isChange(entry) && given.expected === entry.done;
	const isLoad = entry.what === 'layout';
	return {
		...given,
		expected: isLoad ? ofLoad(given.expected) : given.expected,
		changes,
		run: async () => {
			const copied = changes && entry.needs !== 'nothing' && namesOf(entry).length > 0;
			const copy = copied ? await world.copyFor(subject) : undefined;
			const swapped = copy === undefined ? values : overlaid(world.own, values, copy);
			const more = changes && entry.prepare ? await entry.prepare(kitFor(world, subject, swapped)) : {};
			const all = { ...entry.sample, ...swapped, ...more };
			const session = entry.endsSession ? await world.freshSession(subject) : world.sessions[subject];
			const sent = asRequest(entry, all, session);
			if (isLoad) sent.path = loadAlone(sent.path, item.depth, item.depth);
			const answer = await sendAs(session, sent);
			const outcome = isLoad
				? outcomeOfLoad(answer, world.address, all, item.depth)
				: outcomeOf(answer, world.address, all);
			return { outcome, answer };
		}
	};
}

/** The copy's ids, except where the request was to name something else than the own organisation's. */
function overlaid(own: Values, asked: Values, copy: Values): Values {
	return Object.fromEntries(
		Object.entries(asked).map(([name, value]) => [name, value === own[name] ? (copy[name] ?? value) : value])
	);
}

function kitFor(world: World, subject: Subject, ids: Values): Kit {
	return {
		ids,
		anotherSession: async () => hashToken((await world.freshSession(subject)).token ?? ''),
		anotherOrganisation: () => world.joinAnother(subject),
		digestOf: (reportId) => world.digestOf(reportId),
		ownFigure: (reportId) => world.enterFigure(subject, reportId, ids.run ?? ''),
		invitation: () => world.invite(subject, ids.dossier ?? '')
	};
}

/** The load of a page alone, past the layouts above it, which must not be what guards it. */
function loadProbe(world: World, given: Whole, values: Values, { depth }: RouteItem): Probe {
	const { entry, subject } = given;
	const session = world.sessions[subject];
	return {
		...given,
		cell: `${given.cell}, load alone`,
		expected: ofLoad(given.expected),
		changes: false,
		run: async () => {
			const sent = asRequest(entry, values, session);
			const answer = await sendAs(session, { ...sent, path: loadAlone(sent.path, depth, depth) });
			return { outcome: outcomeOfLoad(answer, world.address, values, depth), answer };
		}
	};
}

/** Requests in which one id alone is somebody else's. */
function mixedProbes(world: World, entry: Entry, item: RouteItem): Probe[] {
	const names = namesOf(entry);
	if (names.length < 2) return [];
	return subjects
		.filter((subject) => isAllowed(entry, subject, 'own') && subject !== 'stranger' && subject !== 'newcomer')
		.flatMap((subject) => {
			const others = subject === 'guest' ? (['foreign', 'elsewhere'] as const) : (['foreign'] as const);
			return others.flatMap((other) =>
				names
					.filter((name) => world[other][name] !== world.own[name])
					.map((name) => {
						const values = { ...world.own, [name]: world[other][name] ?? '' };
						const cell = `${subject}, own but for ${other} ${name}`;
						const answer = entry.needs === 'nothing' ? entry.done : (entry.mixed?.[name] ?? '404');
						return probe(world, { entry, subject, cell, expected: answer }, values, item);
					})
			);
		});
}

function cellOf(subject: Subject, whose: Whose): string {
	return `${subject}, ${whose}`;
}

/** Every request on one thing that can be asked of the service. */
export function probesOf(world: World, entry: Entry, item: RouteItem): Probe[] {
	const has = namesOf(entry).length > 0;
	const sides: readonly Whose[] = has ? ['own', 'foreign'] : ['own'];
	const whole = sides.flatMap((whose) =>
		subjects.flatMap((subject) => {
			const given = {
				entry,
				subject,
				cell: cellOf(subject, whose),
				expected: expected(entry, subject, whose)
			};
			const all = [probe(world, given, world[whose], item)];
			if (entry.what === 'page' && item.hasLoad) all.push(loadProbe(world, given, world[whose], item));
			return all;
		})
	);
	return [...whole, ...mixedProbes(world, entry, item)];
}

function twinSubjects(entry: Entry): Subject[] {
	// Where the answer differs on purpose, the entry says so.
	if (namesOf(entry).length === 0 || entry.foreign !== undefined) return [];
	return subjects
		.filter((subject) => subject !== 'stranger' && subject !== 'newcomer')
		.filter((subject) => !isAllowed(entry, subject, 'foreign'));
}

export function hasTwins(entry: Entry): boolean {
	return twinSubjects(entry).length > 0;
}

/** Requests for what nobody has: each is to be answered as the same request for what another organisation has. */
export function twinsOf(world: World, entry: Entry, item: RouteItem): Probe[] {
	return twinSubjects(entry).map((subject) => {
		const given = {
			entry,
			subject,
			cell: cellOf(subject, 'foreign'),
			expected: expected(entry, subject, 'foreign')
		};
		return probe(world, given, world.nowhere, item);
	});
}

/** Digest of an answer without what differs from one request to the next. */
export function bare({ status, headers, body }: Answer): string {
	const text = body
		.toString('utf8')
		.replace(/[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g, 'ID')
		.replace(/nonce="[^"]*"/g, 'nonce')
		.replace(/\b__sveltekit_\w+/g, 'sveltekit');
	const types = [headers['content-type'], headers['cache-control']];
	return createHash('sha256')
		.update(JSON.stringify([status, ...types, text]))
		.digest('hex');
}
