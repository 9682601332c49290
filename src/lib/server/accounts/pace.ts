/**
 * Lets work take at least `milliseconds`, however it ends: answers for a known and an unknown address then take the
 * same time.
 */
export async function atLeast<T>(milliseconds: number, work: () => Promise<T>): Promise<T> {
	const [outcome] = await Promise.allSettled([
		work(),
		new Promise((resolve) => setTimeout(resolve, milliseconds))
	]);
	if (outcome.status === 'rejected') throw outcome.reason;
	return outcome.value;
}
