import { describe, expect, it } from 'vitest';
import { computeNow } from '../calculation';
import type { ComputeResult } from '../calculation/types';
import { parseUnit, sameDimension } from '../quantities/parse-unit';
import { methodById, methods } from './index';
import { solveBalance, standardSigma } from './solar-reflectance-index/solve';
import type { EquationNumbers, Method } from './types';

/** A request that gives each input that has no default, and each optional one. */
function fullRequest(method: Method): Record<string, { value: number }> {
	const values: Record<string, number> = { observedTemperature: 288, nightTemperature: 95 };
	return Object.fromEntries(
		method.inputs.flatMap((input) => {
			if (input.kind !== 'number' || input.default !== undefined) return [];
			return [[input.id, { value: values[input.id] ?? 0.3 }]];
		})
	);
}

function numbersOf(result: ComputeResult): EquationNumbers {
	const known = (record: Record<string, unknown>, id: string): string => {
		if (record[id] === undefined) throw new Error(`the equation names ${id}, which is not there`);
		return `[${id}]`;
	};
	return {
		input: (id) => known(result.inputs, id),
		output: (id) => known(result.outputs, id),
		value: (id) => {
			const used = result.inputs[id];
			return used !== undefined && !Array.isArray(used) && typeof used.value === 'number'
				? used.value
				: undefined;
		}
	};
}

describe.each(methods.map((method) => [method.id, method] as const))('%s', (_id, method) => {
	const inputs = fullRequest(method);
	const result = computeNow({ method: method.id, inputs, evaluation: { propagation: 'none' } });

	it('is found by its id and gives every output that it lists', () => {
		expect(methodById(method.id)).toBe(method);
		expect(Object.keys(result.outputs).sort()).toEqual(method.outputs.map(({ id }) => id).sort());
	});

	it('asks in known groups, in units of one dimension, with citations that exist', () => {
		const groups = new Set(method.groups.map(({ id }) => id));
		const citations = new Set(method.citations.map(({ id }) => id));
		for (const input of method.inputs) {
			expect(groups).toContain(input.group);
			expect(input.question).toMatch(/\?$/);
			if (input.kind !== 'number') continue;
			expect(input.help).toMatch(/Trade term: .+\.$/);
			const own = parseUnit(input.unit);
			for (const unit of input.units) {
				const other = parseUnit(unit);
				expect(
					own !== undefined && other !== undefined && sameDimension(own.dimension, other.dimension)
				).toBe(true);
			}
			expect(input.units[0]).toBe(input.unit);
			if (input.validity !== undefined) expect(citations).toContain(input.validity.source);
		}
		for (const option of method.options) {
			expect(groups).toContain(option.group);
			if (option.choices !== undefined)
				expect(option.choices.map(({ value }) => value)).toContain(option.default);
		}
		for (const equation of method.equations) expect(citations).toContain(equation.citation);
	});

	it('puts numbers into each equation and leaves out those whose inputs are missing', () => {
		const numbers = numbersOf(result);
		for (const equation of method.equations) {
			const put = equation.put(numbers);
			if (equation.outputs.length > 0) expect(put).toContain('[');
			for (const id of equation.outputs) expect(result.outputs[id]).toBeDefined();
		}
		const least = Object.fromEntries(
			Object.entries(inputs).filter(
				([id]) =>
					!method.inputs.some(
						(input) => input.kind === 'number' && input.id === id && input.optional === true
					)
			)
		);
		const bare = computeNow({ method: method.id, inputs: least, evaluation: { propagation: 'none' } });
		for (const equation of method.equations) expect(() => equation.put(numbersOf(bare))).not.toThrow();
	});

	it('captions each of its figures with a finding from the curves', () => {
		for (const figure of method.figures) {
			const series = result.series[figure.series];
			if (series === undefined) throw new Error(figure.series);
			expect(figure.finding(series, result.outputs)).toMatch(/^[A-Z].*\d.*\.$/);
			expect(figure.finding(series, result.outputs)).not.toContain('NaN');
		}
		expect(method.figures.map(({ series }) => series).sort()).toEqual(Object.keys(result.series).sort());
	});
});

describe('averaging period', () => {
	it('is that of the irradiance', () => {
		const claim = { kind: 'claim', value: 300, output: 'subsolarTemperature', period: 'orbit' };
		const inputs = { bondAlbedo: { value: 0.1 } };
		const evaluation = { propagation: 'none' };
		const request = { method: 'sunlit-equilibrium', inputs, evaluation, compareWith: claim };
		expect(computeNow(request).finding?.verdict).toBe('not-comparable');
		const orbit = computeNow({ ...request, options: { irradiancePeriod: 'orbit' } });
		expect(orbit.finding?.verdict).toBe('inconsistent');
	});
});

describe('balance of the solar reflectance index', () => {
	it('is met at the root for any surroundings', () => {
		for (const absorbed of [0, 50, 1000, 5000]) {
			for (const emittance of [0.02, 0.5, 1]) {
				for (const h of [0.01, 5, 30, 500]) {
					for (const [sky, air] of [
						[0, 100],
						[300, 310],
						[320, 200],
						[3, 1000]
					] as const) {
						const t = solveBalance(absorbed, emittance, sky, air, h);
						const out = emittance * standardSigma * (t ** 4 - sky ** 4) + h * (t - air);
						const scale = absorbed + emittance * standardSigma * (t ** 4 + sky ** 4) + h * (t + air);
						expect(Math.abs(out - absorbed) / scale).toBeLessThan(1e-12);
					}
				}
			}
		}
	});

	it('a brighter or better radiating surface is cooler and has the higher index', () => {
		const index = (reflectance: number, emittance: number) =>
			computeNow({
				method: 'solar-reflectance-index',
				inputs: { solarReflectance: { value: reflectance }, thermalEmittance: { value: emittance } },
				evaluation: { propagation: 'none' }
			}).outputs.solarReflectanceIndex?.value ?? NaN;
		for (let r = 0; r < 0.85; r += 0.1) {
			expect(index(r + 0.1, 0.9)).toBeGreaterThan(index(r, 0.9));
			expect(index(r, 0.9)).toBeGreaterThan(index(r, 0.6));
		}
	});
});
