import { expect, it } from 'vitest';
import { addInterval } from './periods';

const at = (text: string) => Date.parse(`${text}T10:00:00Z`) / 1000;

it.each([
	['2026-01-31', 'month', 1, '2026-01-31', '2026-02-28'],
	['2026-02-28', 'month', 1, '2026-01-31', '2026-03-31'],
	['2028-01-31', 'month', 1, '2028-01-31', '2028-02-29'],
	['2026-12-15', 'month', 1, '2026-12-15', '2027-01-15'],
	['2028-02-29', 'year', 1, '2028-02-29', '2029-02-28'],
	['2026-12-30', 'day', 3, '2026-12-30', '2027-01-02'],
	['2026-12-30', 'week', 2, '2026-12-30', '2027-01-13']
])('%s and a %s times %i, from an anchor on %s, is %s', (from, interval, count, anchor, to) => {
	expect(addInterval(at(from), interval, count, at(anchor))).toBe(at(to));
});
