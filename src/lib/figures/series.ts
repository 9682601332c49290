/** A series as a reader sees it: temperatures on the wanted scale, units written out; its table and its CSV. */
import type { Series } from '../calculation/types';
import type { OutputSpec } from '../methods/types';
import { displayUnit } from '../quantities';
import {
	differenceUnit,
	isTemperatureUnit,
	temperatureDifferenceOn,
	temperatureOn,
	type TemperatureScale
} from '../wording/temperature';

export interface FigureColumn {
	name: string;
	unit: string;
	cells: string[];
}

type Curve = Series['curves'][number];

/** Whether a curve shows points on the temperature scale; a difference keeps no zero and is only scaled. */
function isDifference(curve: Curve, outputs: readonly OutputSpec[]): boolean {
	return outputs.some((output) => output.id === curve.id && output.quantity === 'temperature-difference');
}

/** The same series with temperatures on `scale` and every unit written for a reader. */
export function presentSeries(
	series: Series,
	scale: TemperatureScale,
	outputs: readonly OutputSpec[] = []
): Series {
	return {
		x: { ...series.x, unit: displayUnit(series.x.unit) },
		curves: series.curves.map((curve) => {
			const { unit } = curve;
			if (!isTemperatureUnit(unit)) return { ...curve, unit: displayUnit(unit) };
			const difference = isDifference(curve, outputs);
			const convert = (value: number) =>
				difference ? temperatureDifferenceOn(scale, value, unit) : temperatureOn(scale, value, unit);
			return {
				...curve,
				unit: displayUnit(difference ? differenceUnit(scale) : scale),
				values: curve.values.map(convert),
				...(curve.low ? { low: curve.low.map(convert) } : {}),
				...(curve.high ? { high: curve.high.map(convert) } : {})
			};
		})
	};
}

/** Decimals that tell neighbouring values of a column apart without claiming more: the span over a thousand. */
function columnDecimals(values: readonly number[]): number {
	const low = values.reduce((a, b) => Math.min(a, b), Infinity);
	const high = values.reduce((a, b) => Math.max(a, b), -Infinity);
	const span = high - low || Math.abs(high) || 1;
	const exponent = Number(span.toExponential().split('e')[1]);
	return Math.min(6, Math.max(0, 3 - exponent));
}

/** True minus sign for reading; a negative zero loses its sign. */
function cell(value: number, decimals: number): string {
	const text = value.toFixed(decimals);
	return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text.replace('-', '−');
}

/** The table behind a figure: the axis, then each curve with the ends of its coverage band. */
export function figureTable(series: Series): FigureColumn[] {
	const column = (name: string, unit: string, values: readonly number[]): FigureColumn => {
		const decimals = columnDecimals(values);
		return { name, unit, cells: values.map((value) => cell(value, decimals)) };
	};
	return [
		column(series.x.name, series.x.unit, series.x.values),
		...series.curves.flatMap((curve) => [
			column(curve.name, curve.unit, curve.values),
			...(curve.low ? [column(`${curve.name}, low end`, curve.unit, curve.low)] : []),
			...(curve.high ? [column(`${curve.name}, high end`, curve.unit, curve.high)] : [])
		])
	];
}

/** A text cell of a CSV file: quoted where it must be, and never read as a formula by a spreadsheet. */
function csvText(text: string): string {
	const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
	return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Every number of a series in full, as RFC 4180 lines; numbers stay numbers, with a plain minus sign and a point. */
export function seriesCsv(series: Series): string {
	const head = (name: string, unit: string) => csvText(unit ? `${name} [${unit}]` : name);
	const columns: { head: string; values: readonly number[] }[] = [
		{ head: head(series.x.name, series.x.unit), values: series.x.values },
		...series.curves.flatMap((curve) => [
			{ head: head(curve.name, curve.unit), values: curve.values },
			...(curve.low ? [{ head: head(`${curve.name}, low end`, curve.unit), values: curve.low }] : []),
			...(curve.high ? [{ head: head(`${curve.name}, high end`, curve.unit), values: curve.high }] : [])
		])
	];
	const rows = series.x.values.map((_, i) => columns.map((c) => String(c.values[i] ?? '')).join(','));
	return [columns.map((c) => c.head).join(','), ...rows].join('\r\n') + '\r\n';
}
