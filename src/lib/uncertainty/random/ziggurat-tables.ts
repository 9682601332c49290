import { exp, ln } from '../../exact';

/**
 * Tables of the 256-layer ziggurat for the standard normal distribution (Marsaglia & Tsang 2000, Journal of
 * Statistical Software 5(8)): `edge` holds the layers' right ends from the widest, `density` exp(-x^2/2) there.
 */
export const tailStart = 3.6541528853610088;
const layerArea = 0.00492867323399;

export const edge = new Float64Array(257);
export const density = new Float64Array(257);

edge[0] = layerArea / exp((-tailStart * tailStart) / 2);
edge[1] = tailStart;
for (let i = 2; i < 256; i++) {
	const x = edge[i - 1] as number;
	edge[i] = Math.sqrt(-2 * ln(layerArea / x + exp((-x * x) / 2)));
}
edge[256] = 0;
for (let i = 0; i < 257; i++) density[i] = exp((-(edge[i] as number) * (edge[i] as number)) / 2);
