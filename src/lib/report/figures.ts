/** Figures of a run: one per series that the method names, on the report's scale, with its finding. */
import type { ComputeResult } from '../calculation/types';
import { presentSeries } from '../figures';
import type { Method, OutputSpec } from '../methods/types';
import { attachUnit, convert, formatNumber, formatSignificant, displayUnit } from '../quantities';
import { isTemperatureUnit, type TemperatureScale } from '../wording';
import type { FigureRow } from './model';

/** Writes a temperature of a figure's caption on a scale. */
export function temperatureTeller(scale: TemperatureScale): (kelvin: number) => string {
	return (kelvin) => attachUnit(formatNumber(convert(kelvin, 'K', scale), 1), scale);
}

/** The name that all curves share, where there are several. */
function commonName(units: readonly string[], count: number): string | null {
	if (count < 2) return null;
	return units.every(isTemperatureUnit) ? 'temperature' : '';
}

function statedIn(
	result: ComputeResult,
	curves: readonly { id: string; unit: string }[],
	scale: TemperatureScale
): FigureRow['stated'] {
	const { finding } = result;
	if (!finding || !curves.some((curve) => curve.id === finding.output)) return null;
	const [value, unit] =
		finding.kind === 'claim'
			? [finding.stated.value, finding.stated.unit]
			: [finding.limit.value, finding.limit.unit];
	const temperature = isTemperatureUnit(unit);
	const own = temperature ? convert(value, unit, scale) : value;
	const word = finding.kind === 'claim' ? 'stated' : 'limit';
	return {
		value: own,
		label: `${word}, ${attachUnit(formatSignificant(own, 6), temperature ? scale : unit)}`
	};
}

function assumedIn(result: ComputeResult, axis: { id: string; unit: string }): FigureRow['assumed'] {
	const used = result.inputs[axis.id];
	if (!used || Array.isArray(used) || typeof used.value !== 'number' || used.unit !== axis.unit) return null;
	return {
		value: used.value,
		label: `as assumed, ${attachUnit(formatSignificant(used.value, 6), displayUnit(axis.unit))}`
	};
}

/** The figures of a result, in the method's order. */
export function figureRows(
	method: Method,
	outputs: readonly OutputSpec[],
	result: ComputeResult,
	scale: TemperatureScale
): FigureRow[] {
	return method.figures.flatMap((figure): FigureRow[] => {
		const series = result.series[figure.series];
		if (!series || series.x.values.length < 2 || series.curves.length === 0) return [];
		return [
			{
				id: figure.series,
				title: figure.title,
				finding: figure.finding(series, result.outputs, temperatureTeller(scale)),
				yName: commonName(
					series.curves.map((curve) => curve.unit),
					series.curves.length
				),
				series: presentSeries(series, scale, outputs),
				stated: statedIn(result, series.curves, scale),
				assumed: assumedIn(result, series.x)
			}
		];
	});
}
