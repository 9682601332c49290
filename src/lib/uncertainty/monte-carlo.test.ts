import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Correlation } from '../calculation/types';
import { correlatedGroups } from './correlation';
import { shortestInterval, symmetricInterval } from './coverage-interval';
import { distributionFamily } from './distributions';
import { runMonteCarlo, type MonteCarloSettings } from './monte-carlo';
import { Sampler } from './sampler';
import { selectRank } from './select-rank';
import { OrderStatistics } from './tally';
import { blockSize, type InputColumn, type TrialModel } from './trial-model';

function column(id: string, type: string, parameters: Record<string, number>, value = 0): InputColumn {
	const family = distributionFamily(type);
	if (family === undefined) throw new Error(type);
	return {
		id,
		path: `/inputs/${id}`,
		value,
		distribution: family.build(parameters, value),
		degreesOfFreedom: Infinity,
		domain: { low: null, high: null }
	};
}

const model = (columns: InputColumn[], correlations: Correlation[] = []): TrialModel => ({
	columns,
	correlations,
	outputs: ['y'],
	evaluate(inputs, n, out) {
		const y = out.y as Float64Array;
		y.fill(0, 0, n);
		for (const { id } of columns)
			for (let i = 0; i < n; i++) y[i] = (y[i] as number) + (inputs[id]?.[i] as number);
	}
});

const settings: MonteCarloSettings = {
	trials: 100_000,
	digits: 2,
	seed: 's',
	coverage: 0.95,
	interval: 'shortest'
};

function correlation(a: Float64Array, b: Float64Array): number {
	const n = a.length;
	const mean = (x: Float64Array) => x.reduce((sum, v) => sum + v, 0) / n;
	const [ma, mb] = [mean(a), mean(b)];
	let ab = 0;
	let aa = 0;
	let bb = 0;
	for (let i = 0; i < n; i++) {
		const [x, y] = [(a[i] as number) - ma, (b[i] as number) - mb];
		ab += x * y;
		aa += x * x;
		bb += y * y;
	}
	return ab / Math.sqrt(aa * bb);
}

describe('Monte Carlo', () => {
	it('intervals from kept tails are those of a full sort', () => {
		const of = model([column('a', 'normal', { standardUncertainty: 1 }), column('b', 'exponential', {}, 2)]);
		for (const coverage of [0.5, 0.8, 0.95, 0.99]) {
			for (const trials of [10_000, 16_384, 20_001, 100_000]) {
				const sampler = new Sampler(of, 's');
				const all = new Float64Array(trials);
				for (let start = 0; start < trials; start += blockSize) {
					const n = Math.min(blockSize, trials - start);
					sampler.draw(start / blockSize, n);
					for (let i = 0; i < n; i++) {
						all[start + i] = 0 + (sampler.columns.a?.[i] as number) + (sampler.columns.b?.[i] as number);
					}
				}
				const order = new OrderStatistics(trials, all.sort(), new Float64Array(0));
				const { y } = runMonteCarlo(of, { ...settings, coverage, trials }).outputs;
				expect(y?.interval).toEqual(shortestInterval(order, coverage));
				expect(y?.symmetric).toEqual(symmetricInterval(order, coverage));
			}
		}
	});

	it('a block comes out the same whoever draws it, and in whatever order', () => {
		const of = model([
			column('a', 'normal', { standardUncertainty: 1 }),
			column('b', 'rectangular', { halfWidth: 1 })
		]);
		const first = new Sampler(of, 's');
		for (const block of [0, 1, 2, 3]) first.draw(block, blockSize);
		const other = new Sampler(of, 's');
		other.draw(3, blockSize);
		expect(other.columns).toEqual(first.columns);
	});

	it('meets the correlation of normal inputs, and nearly that of others', () => {
		const correlations = [{ a: 'a', b: 'b', coefficient: 0.7 }];
		for (const [type, parameters, allowed] of [
			['normal', { standardUncertainty: 2 }, 0.008],
			['rectangular', { halfWidth: 2 }, 0.026]
		] as const) {
			const sampler = new Sampler(
				model([column('a', type, parameters), column('b', type, parameters)], correlations),
				's'
			);
			const a = new Float64Array(16 * blockSize);
			const b = new Float64Array(16 * blockSize);
			for (let block = 0; block < 16; block++) {
				sampler.draw(block, blockSize);
				a.set(sampler.columns.a as Float64Array, block * blockSize);
				b.set(sampler.columns.b as Float64Array, block * blockSize);
			}
			expect(Math.abs(correlation(a, b) - 0.7)).toBeLessThan(allowed);
		}
	});

	it('full correlation is allowed and cancels', () => {
		const of = model(
			[column('a', 'normal', { standardUncertainty: 2 }), column('b', 'normal', { standardUncertainty: 2 })],
			[{ a: 'a', b: 'b', coefficient: -1 }]
		);
		expect(runMonteCarlo(of, settings).outputs.y?.standardUncertainty).toBeLessThan(1e-12);
	});

	it('selects the same rank as a sort', () => {
		fc.assert(
			fc.property(
				fc.array(fc.integer({ min: -5, max: 5 }), { minLength: 1, maxLength: 60 }),
				fc.nat(),
				(list, at) => {
					const rank = at % list.length;
					expect(selectRank(Float64Array.from(list), rank)).toBe(Float64Array.from(list).sort()[rank]);
				}
			)
		);
	});

	it('builds groups of what is connected only', () => {
		const columns = ['a', 'b', 'c', 'd', 'e'].map((id) => column(id, 'normal', { standardUncertainty: 1 }));
		const groups = correlatedGroups(columns, [
			{ a: 'a', b: 'd', coefficient: 0.5 },
			{ a: 'd', b: 'b', coefficient: 0.2 },
			{ a: 'c', b: 'e', coefficient: 0 }
		]);
		expect(groups.map((group) => group.columns.map(({ id }) => id))).toEqual([['a', 'b', 'd']]);
	});

	it('adaptive trials that reach their cap say so', () => {
		// Heavy tails: the standard deviation of t with 2.1 degrees of freedom does not settle.
		const of = model([column('a', 'students-t', { standardUncertainty: 1, degreesOfFreedom: 2.1 })]);
		const outcome = runMonteCarlo(of, { ...settings, trials: 'adaptive', coverage: 0.9 });
		expect(outcome.converged).toBe(false);
	}, 60_000);
});
