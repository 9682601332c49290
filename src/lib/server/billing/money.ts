/**
 * An amount as people read it: "€24.00".
 * @param minor in the smallest unit of the currency (cents; for a currency without cents, the unit itself)
 * @param currency three letters
 */
export function amountText(minor: number, currency: string): string {
	const format = new Intl.NumberFormat('en-GB', { style: 'currency', currency: currency.toUpperCase() });
	return format.format(minor / 10 ** (format.resolvedOptions().maximumFractionDigits ?? 2));
}
