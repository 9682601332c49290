import { parseUnit, rememberUnit } from './parse-unit';

/**
 * Looks up the units that the own table does not know with mathjs, which is loaded only then: it takes longer to
 * load than most requests take to compute. A text that mathjs does not know either stays unknown.
 */
export async function loadUnits(texts: Iterable<string>): Promise<void> {
	const missing = [...new Set(texts)].filter((text) => text.length <= 80 && parseUnit(text) === undefined);
	if (missing.length === 0) return;
	const { unit } = await import('mathjs');
	for (const text of missing.slice(0, 100)) {
		if (/[\d.]+\s*[A-Za-z(]/.test(text) && /^\s*[\d.]/.test(text)) continue;
		try {
			const one = unit(1, text);
			const si = one.toSI().toJSON().value;
			const exponents = (one as unknown as { dimensions: number[] }).dimensions;
			if (typeof si !== 'number' || !Number.isFinite(si) || si <= 0) continue;
			const [
				mass = 0,
				length = 0,
				time = 0,
				current = 0,
				temperature = 0,
				light = 0,
				amount = 0,
				angle = 0,
				bit = 0
			] = exponents;
			const other = [current, light, amount, bit].some((exponent) => exponent !== 0) ? 1 : 0;
			rememberUnit(text, {
				dimension: [length, mass, time, temperature, angle, other],
				num: si,
				den: 1,
				shift: 0,
				factors: [{ text, tex: `\\mathrm{${text.replace(/[^A-Za-z0-9 ^/()-]/g, '')}}`, exponent: 1 }]
			});
		} catch {
			// Unknown to mathjs as well: the check of the request says so with the path.
		}
	}
}
