/**
 * A time some intervals later. Months keep the day of the anchor: from 31 January to the last of February and on to
 * 31 March.
 * @param time Unix seconds
 * @param anchor Unix seconds of the first period's beginning
 */
export function addInterval(time: number, interval: string, count: number, anchor: number): number {
	if (interval === 'day') return time + count * 86_400;
	if (interval === 'week') return time + count * 7 * 86_400;
	const from = new Date(time * 1000);
	const day = new Date(anchor * 1000).getUTCDate();
	const months = interval === 'year' ? 12 * count : count;
	const first = new Date(from.getTime());
	first.setUTCDate(1);
	first.setUTCMonth(first.getUTCMonth() + months);
	const last = new Date(Date.UTC(first.getUTCFullYear(), first.getUTCMonth() + 1, 0)).getUTCDate();
	first.setUTCDate(Math.min(day, last));
	return Math.floor(first.getTime() / 1000);
}
