import { invalidRequest, noSuch } from './errors';
import type { Params } from './params';
import type { List } from './wire';

export type Range = { gt?: number; gte?: number; lt?: number; lte?: number };

/** `created=123` or `created[gte]=123`. */
export function readRange(params: Params, name: string): Range | undefined {
	if (!params.has(name)) return undefined;
	try {
		const range = params.child(name);
		if (range === undefined) return undefined;
		return {
			gt: range.integer('gt'),
			gte: range.integer('gte'),
			lt: range.integer('lt'),
			lte: range.integer('lte')
		};
	} catch {
		const exactly = params.integer(name);
		return { gte: exactly, lte: exactly };
	}
}

export const isWithin = (value: number, range: Range | undefined): boolean =>
	range === undefined ||
	((range.gt === undefined || value > range.gt) &&
		(range.gte === undefined || value >= range.gte) &&
		(range.lt === undefined || value < range.lt) &&
		(range.lte === undefined || value <= range.lte));

export type Paging = { limit: number; after?: string; before?: string };

export function readPaging(params: Params): Paging {
	const limit = params.integer('limit') ?? 10;
	if (limit < 1 || limit > 100)
		throw invalidRequest('Invalid limit: must be between 1 and 100', {
			code: 'parameter_invalid_integer',
			param: 'limit'
		});
	const after = params.string('starting_after');
	const before = params.string('ending_before');
	if (after !== undefined && before !== undefined)
		throw invalidRequest('You cannot parameterize on both `ending_before` and `starting_after`.');
	return { limit, after, before };
}

/** One page of items that come newest first. @param what as errors call an item */
export function pageOf<T extends { id: string }>(
	items: T[],
	{ limit, after, before }: Paging,
	url: string,
	what: string
): List<T> {
	const cursor = after ?? before;
	const at = cursor === undefined ? -1 : items.findIndex(({ id }) => id === cursor);
	if (cursor !== undefined && at < 0)
		throw noSuch(what, cursor, after === undefined ? 'ending_before' : 'starting_after');
	if (before !== undefined) {
		const earlier = items.slice(0, at);
		return { object: 'list', data: earlier.slice(-limit), has_more: earlier.length > limit, url };
	}
	const rest = items.slice(at + 1);
	return { object: 'list', data: rest.slice(0, limit), has_more: rest.length > limit, url };
}

/** Newest first. */
export const newestFirst = <T>(byId: { [id: string]: T }): T[] => Object.values(byId).reverse();

/** A whole list inside another object. */
export const wholeList = <T>(data: T[], url: string): List<T> => ({
	object: 'list',
	data,
	has_more: false,
	url
});
