/** The value of rank `rank` from 0, by partitioning in place (Hoare's selection); no full sort is needed for a band. */
export function selectRank(values: Float64Array, rank: number): number {
	let left = 0;
	let right = values.length - 1;
	while (left < right) {
		const pivot = values[(left + right) >> 1] as number;
		let i = left;
		let j = right;
		while (i <= j) {
			while ((values[i] as number) < pivot) i++;
			while ((values[j] as number) > pivot) j--;
			if (i <= j) {
				const held = values[i] as number;
				values[i++] = values[j] as number;
				values[j--] = held;
			}
		}
		if (rank <= j) right = j;
		else if (rank >= i) left = i;
		else break;
	}
	return values[rank] as number;
}
