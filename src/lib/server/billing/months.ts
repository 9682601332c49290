/* Calendar months in UTC, counted from an anchor as the payment service counts billing periods. */

function daysIn(year: number, month: number): number {
	return new Date(Date.UTC(year, month + 1, 0)).getUTCDate();
}

/**
 * The anchor moved by whole calendar months. A day that the month does not have becomes its last one; counted from the
 * anchor, not from the month before, so that 31 January leads over 29 February to 31 March.
 */
export function addMonths(anchor: Date, months: number): Date {
	const first = new Date(Date.UTC(anchor.getUTCFullYear(), anchor.getUTCMonth() + months, 1));
	const [year, month] = [first.getUTCFullYear(), first.getUTCMonth()];
	const moved = new Date(anchor);
	moved.setUTCFullYear(year, month, Math.min(anchor.getUTCDate(), daysIn(year, month)));
	return moved;
}

/** A month from `start`, included, to `end`, not included. */
export interface MonthWindow {
	start: Date;
	end: Date;
}

/** The month counted from the anchor in which an instant lies. */
export function monthAround(anchor: Date, at: Date): MonthWindow {
	const apart =
		(at.getUTCFullYear() - anchor.getUTCFullYear()) * 12 + at.getUTCMonth() - anchor.getUTCMonth();
	const n = addMonths(anchor, apart) <= at ? apart : apart - 1;
	return { start: addMonths(anchor, n), end: addMonths(anchor, n + 1) };
}
