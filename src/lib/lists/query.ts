/**
 * What a list is asked for, as it stands in the address: `?q=roof&sort=title&order=asc&page=2`. Every list reads it
 * the same way, so that a search, a sort and a page can be linked to, bookmarked and gone back to.
 */
export const pageSize = 25;
export const longestSearch = 200;

export type Order = 'asc' | 'desc';

export interface ListQuery<Column extends string = string> {
	/** The search as typed, trimmed. */
	q: string;
	sort: Column;
	order: Order;
	/** First page is 1. */
	page: number;
	/** A state to which the list is narrowed, or '' for any. */
	state: string;
}

export interface ListShape<Column extends string> {
	columns: readonly Column[];
	/** Sort and order of a list that was asked for nothing. */
	sort: Column;
	order: Order;
	states?: readonly string[];
}

/** Reads a query; what is not understood takes its default, since an old link should still show a list. */
export function readListQuery<Column extends string>(
	params: URLSearchParams,
	shape: ListShape<Column>
): ListQuery<Column> {
	const sort = shape.columns.find((column) => column === params.get('sort')) ?? shape.sort;
	const order = params.get('order');
	const page = Number(params.get('page') ?? 1);
	const state = params.get('state') ?? '';
	return {
		q: (params.get('q') ?? '').trim().slice(0, longestSearch),
		sort,
		order: order === 'asc' || order === 'desc' ? order : sort === shape.sort ? shape.order : 'asc',
		page: Number.isSafeInteger(page) && page >= 1 && page <= 1_000_000 ? page : 1,
		state: shape.states?.includes(state) ? state : ''
	};
}

/** The query as the search part of an address, with only what differs from a bare list; '' or `?...`. */
export function listSearch<Column extends string>(
	query: ListQuery<Column>,
	shape: ListShape<Column>,
	changes: Partial<ListQuery<Column>> = {}
): string {
	const next = { ...query, ...changes };
	const params = new URLSearchParams();
	if (next.q !== '') params.set('q', next.q);
	if (next.state !== '') params.set('state', next.state);
	if (next.sort !== shape.sort || next.order !== shape.order) {
		params.set('sort', next.sort);
		params.set('order', next.order);
	}
	if (next.page > 1) params.set('page', String(next.page));
	const text = params.toString();
	return text === '' ? '' : `?${text}`;
}

/** One page of a list with what it was cut from. */
export interface Listed<Row> {
	rows: Row[];
	/** Page shown: the last one where the query asked beyond the end. */
	page: number;
	pages: number;
	/** Rows that match the search. */
	matching: number;
	/** Rows without any search. */
	total: number;
}
