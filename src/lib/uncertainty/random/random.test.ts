import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sha256Hex } from '../../exact/sha256';
import { Stream } from './stream';

function moments(values: Float64Array): { mean: number; variance: number; fourth: number } {
	const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
	let second = 0;
	let fourth = 0;
	for (const x of values) {
		second += (x - mean) * (x - mean);
		fourth += (x - mean) ** 4;
	}
	return { mean, variance: second / values.length, fourth: fourth / values.length };
}

describe('random numbers', () => {
	it('hashes as FIPS 180-4 does', () => {
		fc.assert(
			fc.property(fc.string({ maxLength: 300, unit: 'grapheme' }), (text) => {
				expect(sha256Hex(text)).toBe(createHash('sha256').update(text, 'utf8').digest('hex'));
			})
		);
	});

	it('draws the same from the same name, by blocks as one by one', () => {
		const block = new Float64Array(5000);
		new Stream('noonmark/a/0').fillNormal(block, 5000, 0, 1);
		const single = new Stream('noonmark/a/0');
		expect(Array.from(block)).toEqual(Array.from({ length: 5000 }, () => single.normal()));
		const uniform = new Float64Array(5000);
		new Stream('noonmark/a/0').fillUniform(uniform, 5000, 0, 1);
		const one = new Stream('noonmark/a/0');
		expect(Array.from(uniform)).toEqual(Array.from({ length: 5000 }, () => one.uniform()));
		expect(new Stream('noonmark/a/1').uniform()).not.toBe(new Stream('noonmark/a/0').uniform());
	});

	it('normals have the moments and tails of the normal distribution', () => {
		const n = 1_000_000;
		const values = new Float64Array(n);
		new Stream('moments').fillNormal(values, n, 0, 1);
		const { mean, variance, fourth } = moments(values);
		expect(Math.abs(mean)).toBeLessThan(4e-3);
		expect(Math.abs(variance - 1)).toBeLessThan(6e-3);
		expect(Math.abs(fourth - 3)).toBeLessThan(0.04);
		for (const [z, p] of [
			[1, 0.1586553],
			[2, 0.0227501],
			[3, 0.0013499],
			[3.6541528853610088, 1.2901e-4]
		] as const) {
			const above = values.filter((x) => x > z).length / n;
			const below = values.filter((x) => x < -z).length / n;
			const allowed = 5 * Math.sqrt((p * (1 - p)) / n);
			expect(Math.abs(above - p)).toBeLessThan(allowed);
			expect(Math.abs(below - p)).toBeLessThan(allowed);
		}
	});

	it('uniforms fill every bin alike', () => {
		const n = 640_000;
		const values = new Float64Array(n);
		new Stream('bins').fillUniform(values, n, 0, 1);
		const bins = new Float64Array(64);
		for (const x of values) bins[Math.floor(x * 64)] = (bins[Math.floor(x * 64)] ?? 0) + 1;
		const chi = bins.reduce((sum, count) => sum + (count - n / 64) ** 2 / (n / 64), 0);
		expect(chi).toBeGreaterThan(30);
		expect(chi).toBeLessThan(110);
	});

	it.each([0.4, 1, 3.7])('gamma numbers of shape %s have that mean and variance', (shape) => {
		const stream = new Stream(`gamma ${shape}`);
		const values = Float64Array.from({ length: 200_000 }, () => stream.gamma(shape));
		const { mean, variance } = moments(values);
		expect(Math.abs(mean / shape - 1)).toBeLessThan(0.02);
		expect(Math.abs(variance / shape - 1)).toBeLessThan(0.04);
	});
});
