import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addMonths, monthAround } from './months';

const iso = (text: string) => new Date(`${text}T10:30:00Z`);

describe('addMonths', () => {
	it.each([
		['2027-01-15', 1, '2027-02-15'],
		['2027-01-31', 1, '2027-02-28'],
		['2028-01-31', 1, '2028-02-29'],
		['2027-01-31', 2, '2027-03-31'],
		['2027-01-30', 3, '2027-04-30'],
		['2027-12-31', 2, '2028-02-29'],
		['2028-02-29', 12, '2029-02-28'],
		['2028-02-29', 48, '2032-02-29'],
		['2027-03-31', -1, '2027-02-28']
	])('%s by %i months is %s', (from, months, to) => {
		expect(addMonths(iso(from), months)).toEqual(iso(to));
	});
});

describe('monthAround', () => {
	it('counts from the anchor, also in the second year of a yearly plan', () => {
		expect(monthAround(iso('2027-01-31'), iso('2028-03-05'))).toEqual({
			start: iso('2028-02-29'),
			end: iso('2028-03-31')
		});
	});

	it('begins a month at its first instant and not before', () => {
		const anchor = iso('2027-01-31');
		const february = iso('2027-02-28');
		expect(monthAround(anchor, february).start).toEqual(february);
		expect(monthAround(anchor, new Date(february.getTime() - 1)).start).toEqual(anchor);
	});

	it('puts every instant into exactly one month, and months follow each other without a gap', () => {
		const date = fc.date({ min: iso('2000-01-01'), max: iso('2100-01-01'), noInvalidDate: true });
		fc.assert(
			fc.property(date, date, (anchor, at) => {
				const { start, end } = monthAround(anchor, at);
				expect(start <= at && at < end).toBe(true);
				expect(monthAround(anchor, end).start).toEqual(end);
				expect(monthAround(anchor, new Date(start.getTime() - 1)).end).toEqual(start);
			})
		);
	});
});
