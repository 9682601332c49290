import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { listSearch, longestSearch, readListQuery } from './query';
import { dossierList, reportList } from './shapes';

const read = (search: string) => readListQuery(new URLSearchParams(search), reportList);

describe('readListQuery', () => {
	it('takes what a bare list shows where nothing, or nothing sensible, is asked', () => {
		const bare = { q: '', sort: 'revised', order: 'desc', page: 1, state: '' };
		expect(read('')).toEqual(bare);
		expect(read('sort=password&order=up&page=-3&state=deleted')).toEqual(bare);
		expect(read('page=1e99')).toEqual(bare);
		expect(read('page=2.5')).toEqual(bare);
	});

	it('reads search, state, sort and page', () => {
		expect(read('q=+coast+&state=in-review&sort=number&order=desc&page=3')).toEqual({
			q: 'coast',
			state: 'in-review',
			sort: 'number',
			order: 'desc',
			page: 3
		});
		// A column of text runs upwards unless told otherwise.
		expect(read('sort=title').order).toBe('asc');
		expect(read(`q=${'x'.repeat(500)}`).q).toHaveLength(longestSearch);
	});

	it('knows no state where the list has none', () => {
		expect(readListQuery(new URLSearchParams('state=draft'), dossierList).state).toBe('');
	});
});

describe('listSearch', () => {
	it('leaves out what a bare list shows', () => {
		expect(listSearch(read(''), reportList)).toBe('');
		expect(listSearch(read('q=a&page=2'), reportList, { page: 1 })).toBe('?q=a');
	});

	it('gives back any query that it wrote', () => {
		const queries = fc.record({
			q: fc.string({ maxLength: 60 }).map((text) => text.trim()),
			sort: fc.constantFrom(...reportList.columns),
			order: fc.constantFrom('asc' as const, 'desc' as const),
			page: fc.integer({ min: 1, max: 9999 }),
			state: fc.constantFrom('', ...(reportList.states ?? []))
		});
		fc.assert(
			fc.property(queries, (query) => {
				expect(read(listSearch(query, reportList))).toEqual(query);
			})
		);
	});
});
