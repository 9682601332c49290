const headings: Readonly<Record<number, string>> = {
	401: 'Please sign in first.',
	403: 'You may not do this.',
	404: 'There is nothing here.',
	409: 'This has changed in the meantime.',
	410: 'This link no longer works.',
	413: 'That file is too large.',
	429: 'Too many tries in a short time.'
};

/** What an error page says on top; only a fault of ours is called one. */
export function errorHeading(status: number): string {
	const other = status < 500 ? 'This request could not be understood.' : 'Something went wrong on our side.';
	return headings[status] ?? other;
}
