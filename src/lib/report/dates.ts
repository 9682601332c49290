/** Instants as a report prints them: the day in words, the time with its offset from UTC, whatever the machine's zone. */
const months = [
	'January',
	'February',
	'March',
	'April',
	'May',
	'June',
	'July',
	'August',
	'September',
	'October',
	'November',
	'December'
];

const form = /^(\d{4})-(\d{2})-(\d{2})(?:T(\d{2}):(\d{2})(?::\d{2}(?:\.\d+)?)?(Z|[+-]\d{2}:?\d{2})?)?$/;

function parts(instant: string): RegExpExecArray {
	const match = form.exec(instant);
	if (!match) throw new Error(`“${instant}” is not an instant in the form 2026-11-28T14:05:00Z.`);
	return match;
}

/** "28 November 2026", in the instant's own offset. */
export function dayText(instant: string): string {
	const [, year, month, day] = parts(instant);
	return `${Number(day)}\u00a0${months[Number(month) - 1] ?? ''}\u00a0${year}`;
}

/** "28 November 2026, 14:05 UTC", or with "UTC+01:00"; a day alone where no time is known. */
export function instantText(instant: string): string {
	const [, , , , hour, minute, offset] = parts(instant);
	if (hour === undefined) return dayText(instant);
	const zero = offset === undefined || /^(Z|[+-]00:?00)$/.test(offset);
	const zone = zero ? 'UTC' : `UTC${offset.replace('-', '−').replace(/^(.\d{2}):?(\d{2})$/, '$1:$2')}`;
	return `${dayText(instant)}, ${hour}:${minute}\u00a0${zone}`;
}
