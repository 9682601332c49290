import type { SpreadKind } from '$lib/calculation/draft';
import { parseNumber, parseNumbers } from '$lib/quantities/parse-number';

/** Points of a small sketch of a density: x from 0 to 1, y from 0 to 1, and where the best estimate stands. */
export interface Sketch {
	points: [number, number][];
	/** Separate bars, for a discrete distribution. */
	bars?: boolean;
	estimate: number;
}

const steps = 48;

function curve(f: (t: number) => number): [number, number][] {
	const points = Array.from({ length: steps + 1 }, (_, i): [number, number] => [i / steps, f(i / steps)]);
	const top = Math.max(...points.map(([, y]) => (Number.isFinite(y) ? y : 0)), 1e-12);
	return points.map(([x, y]) => [x, Math.min(1, Number.isFinite(y) ? y / top : 1)]);
}

const bell = curve((t) => Math.exp(-0.5 * ((t - 0.5) * 6.4) ** 2));
const box: [number, number][] = [
	[0.2, 0],
	[0.2, 0.75],
	[0.8, 0.75],
	[0.8, 0]
];

/**
 * The shape of a distribution for the small drawing beside its numbers: form only, no scale.
 * @returns undefined where there is nothing to draw (exact) or the numbers cannot be read yet
 */
export function densitySketch(
	kind: SpreadKind,
	value: string,
	parameters: Readonly<Record<string, string>>
): Sketch | undefined {
	const read = (id: string) => {
		const parsed = parseNumber(parameters[id] ?? '');
		return parsed.ok ? parsed.value : undefined;
	};
	const best = parseNumber(value);
	const between = () => {
		const low = read('low');
		const high = read('high');
		if (low === undefined || high === undefined || !(high > low)) return undefined;
		const at = best.ok ? (best.value - low) / (high - low) : 0.5;
		return { low, high, at: 0.1 + 0.8 * Math.min(1.1, Math.max(-0.1, at)) };
	};
	switch (kind) {
		case 'exact':
			return undefined;
		case 'normal':
		case 'students-t':
			return read('standardUncertainty') === undefined ? undefined : { points: bell, estimate: 0.5 };
		case 'rectangular':
			return read('halfWidth') === undefined ? undefined : { points: box, estimate: 0.5 };
		case 'curvilinear-trapezoid':
		case 'trapezoidal': {
			if (read('halfWidth') === undefined) return undefined;
			const beta = kind === 'trapezoidal' ? Math.min(1, Math.max(0, read('beta') ?? 0.5)) : 0.7;
			return {
				points: [
					[0.1, 0],
					[0.5 - 0.4 * beta, 0.8],
					[0.5 + 0.4 * beta, 0.8],
					[0.9, 0]
				],
				estimate: 0.5
			};
		}
		case 'triangular':
			return read('halfWidth') === undefined
				? undefined
				: {
						points: [
							[0.1, 0],
							[0.5, 1],
							[0.9, 0]
						],
						estimate: 0.5
					};
		case 'arcsine':
			return read('halfWidth') === undefined
				? undefined
				: { points: curve((t) => 1 / Math.sqrt(Math.max(1e-3, 1 - (2.2 * (t - 0.5)) ** 2))), estimate: 0.5 };
		case 'rectangular-bounds': {
			const range = between();
			return range && { points: box.map(([x, y]) => [x < 0.5 ? 0.1 : 0.9, y]), estimate: range.at };
		}
		case 'triangular-bounds': {
			const range = between();
			const mode = read('mode');
			if (range === undefined || mode === undefined) return undefined;
			const at = 0.1 + (0.8 * (mode - range.low)) / (range.high - range.low);
			return {
				points: [
					[0.1, 0],
					[at, 1],
					[0.9, 0]
				],
				estimate: range.at
			};
		}
		case 'beta': {
			const range = between();
			const alpha = read('alpha');
			const beta = read('beta');
			if (range === undefined || !(alpha !== undefined && alpha > 0) || !(beta !== undefined && beta > 0)) {
				return undefined;
			}
			const shape = curve((t) => {
				const u = Math.min(0.995, Math.max(0.005, (t - 0.1) / 0.8));
				return t < 0.1 || t > 0.9 ? 0 : u ** (alpha - 1) * (1 - u) ** (beta - 1);
			});
			return { points: shape, estimate: range.at };
		}
		case 'lognormal':
			return (read('geometricStandardDeviation') ?? 0) > 1
				? {
						points: curve((t) => (t <= 0 ? 0 : Math.exp(-0.5 * (Math.log(t / 0.3) / 0.5) ** 2) / t)),
						estimate: 0.3
					}
				: undefined;
		case 'exponential':
			return { points: [[0, 0], ...curve((t) => Math.exp(-4 * t))], estimate: 0.25 };
		case 'discrete': {
			const values = parseNumbers(parameters.values ?? '');
			const weights = parseNumbers(parameters.weights ?? '');
			if (!values.ok || !weights.ok || values.values.length !== weights.values.length) return undefined;
			const low = Math.min(...values.values);
			const width = Math.max(...values.values) - low || 1;
			const top = Math.max(...weights.values) || 1;
			const place = (x: number) => 0.1 + (0.8 * (x - low)) / width;
			return {
				bars: true,
				points: values.values.map((x, i) => [place(x), (weights.values[i] ?? 0) / top]),
				estimate: best.ok ? place(best.value) : 0.5
			};
		}
	}
}
