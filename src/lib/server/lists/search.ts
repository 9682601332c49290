import { and, asc, desc, ilike, or, sql, type SQL, type SQLWrapper } from 'drizzle-orm';
import { pageSize, type Listed, type ListQuery, type Order } from '$lib/lists/query';

/** A text as a LIKE pattern that finds it anywhere: its own wildcards stand for themselves. */
export function containing(text: string): string {
	return `%${text.replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
}

const mostWords = 8;

/** Each word of the search in any of the columns; undefined for an empty search. */
export function matching(q: string, columns: readonly SQLWrapper[]): SQL | undefined {
	// PostgreSQL text holds no NUL; a search for one finds what the rest of it finds.
	const words = q.replaceAll('\0', ' ').split(/\s+/).filter(Boolean).slice(0, mostWords);
	return and(...words.map((word) => or(...columns.map((column) => ilike(sql`${column}`, containing(word))))));
}

/** Order by a column, then by id, so that no row is on two pages. */
export function ordered(column: SQLWrapper, order: Order, id: SQLWrapper): SQL[] {
	return [order === 'asc' ? asc(column) : desc(column), asc(id)];
}

/**
 * Cuts the page that a query asks for.
 * @param count rows that match, and rows without the search
 * @param fetch reads one page of rows
 */
export async function paged<Row>(
	query: ListQuery,
	count: () => Promise<{ matching: number; total: number }>,
	fetch: (limit: number, offset: number) => Promise<Row[]>
): Promise<Listed<Row>> {
	const { matching: found, total } = await count();
	const pages = Math.max(1, Math.ceil(found / pageSize));
	const page = Math.min(query.page, pages);
	const rows = found === 0 ? [] : await fetch(pageSize, (page - 1) * pageSize);
	return { rows, page, pages, matching: found, total };
}
