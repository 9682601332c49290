/** A browser's description of itself in a few words; for the eye only, since a browser may say anything. */
export function browserName(userAgent: string): string {
	const browsers: readonly (readonly [RegExp, string])[] = [
		[/Edg\//, 'Edge'],
		[/OPR\//, 'Opera'],
		[/Firefox\//, 'Firefox'],
		[/Chrom(e|ium)\//, 'Chrome'],
		[/Safari\//, 'Safari']
	];
	const systems: readonly (readonly [RegExp, string])[] = [
		[/Android/, 'Android'],
		[/iPhone|iPad/, 'iOS'],
		[/Windows/, 'Windows'],
		[/Mac OS X/, 'macOS'],
		[/Linux/, 'Linux']
	];
	const browser = browsers.find(([pattern]) => pattern.test(userAgent))?.[1];
	const system = systems.find(([pattern]) => pattern.test(userAgent))?.[1];
	if (browser === undefined) return 'An unknown browser';
	return system === undefined ? browser : `${browser} on ${system}`;
}
