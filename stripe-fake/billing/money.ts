/** An amount in the smallest unit of its currency, as people write it. */
export function asMoney(amount: number, currency: string): string {
	const format = new Intl.NumberFormat('en', { style: 'currency', currency, currencyDisplay: 'code' });
	const digits = format.resolvedOptions().maximumFractionDigits ?? 2;
	return format.format(amount / 10 ** digits).replace(/\u00a0/g, ' ');
}

/** A day as people write it. @param seconds Unix */
export const asDay = (seconds: number): string =>
	new Date(seconds * 1000).toLocaleDateString('en-GB', {
		day: 'numeric',
		month: 'long',
		year: 'numeric',
		timeZone: 'UTC'
	});
