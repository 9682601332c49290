import { compute } from '$lib/calculation/compute';
import type { ComputeRequest } from '$lib/calculation/types';
import { figureSpec, figureTable, type FigureColumn } from '$lib/figures';
import { methodById } from '$lib/methods';
import { nominalSolarIrradiance } from '$lib/methods/constants';
import { formatNumber } from '$lib/quantities';
import { intervalLine, presentOutput, wordedOutputs } from '$lib/wording';
import { drawForPage, measureFigureText } from '../figures/draw';

/** The worked example of the front page. The body and the notice are invented; every figure is computed here. */
export interface WorkedExample {
	perihelion: string;
	irradiance: string;
	albedo: string;
	albedoUncertainty: string;
	emissivity: string;
	answers: {
		id: string;
		label: string;
		value: string;
		/** The same on the scale of the figure. */
		kelvin: string;
		uncertainty: string | undefined;
		interval: string | undefined;
	}[];
	figure: { svg: string; svgNarrow: string; finding: string; table: FigureColumn[] };
	record: string;
}

/** Closest approach of the invented minor planet Orrin, in astronomical units. */
const perihelion = 1.6;

function request(): ComputeRequest {
	const irradiance = Number((nominalSolarIrradiance / (perihelion * perihelion)).toFixed(1));
	return {
		method: 'sunlit-equilibrium',
		inputs: {
			irradiance: { value: irradiance, unit: 'W/m^2' },
			bondAlbedo: { value: 0.05, distribution: { type: 'normal', standardUncertainty: 0.01 } },
			emissivity: { value: 0.95 }
		},
		// Enough for the digits shown; a page must not wait for more.
		evaluation: { trials: 20_000 }
	};
}

async function work(): Promise<WorkedExample> {
	const asked = request();
	const method = methodById(asked.method);
	const result = await compute(asked);
	const figure = method?.figures[0];
	const series = figure && result.series[figure.series];
	if (method === undefined || figure === undefined || series === undefined) {
		throw new Error('The example’s method gives no curve to draw.');
	}
	const finding = figure.finding(series, result.outputs);
	const draw = (width: number, height: number) =>
		drawForPage(figureSpec(series, { width, height, measure: measureFigureText }), finding);
	const given = (id: string, decimals: number): string => {
		const used = result.inputs[id];
		if (used === undefined || Array.isArray(used) || typeof used.value !== 'number') {
			throw new Error(`The example’s result does not list the input ${id}.`);
		}
		return formatNumber(used.value, decimals);
	};
	const outputOf = (id: string) => {
		const output = result.outputs[id];
		if (output === undefined) throw new Error(`The example’s result lacks the output ${id}.`);
		return output;
	};
	const albedo = result.inputs.bondAlbedo;
	return {
		perihelion: formatNumber(perihelion, 1),
		irradiance: given('irradiance', 1),
		albedo: given('bondAlbedo', 2),
		albedoUncertainty: formatNumber((!Array.isArray(albedo) && albedo?.standardUncertainty) || 0, 2),
		emissivity: given('emissivity', 2),
		answers: wordedOutputs(method, result, 'degC').map(({ spec: output, presented }) => ({
			id: output.id,
			label: output.label,
			value: presented.estimate,
			kelvin: presentOutput(outputOf(output.id), output, 'K').estimate,
			uncertainty: presented.uncertainty,
			interval: intervalLine(presented, { scale: 'degC' })
		})),
		// One after the other: the drawing library numbers its parts in one count per process.
		figure: {
			svg: await draw(620, 230),
			svgNarrow: await draw(310, 200),
			finding,
			table: figureTable(series)
		},
		record: result.record
	};
}

let worked: Promise<WorkedExample> | undefined;

/** Computed once per process, at the first reader's request; a failure is not kept. */
export function workedExample(): Promise<WorkedExample> {
	worked ??= work().catch((cause: unknown) => {
		worked = undefined;
		throw cause;
	});
	return worked;
}
