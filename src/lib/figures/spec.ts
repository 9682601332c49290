/**
 * A series as a vega-lite drawing in the look: axes in ink, curves named at the curve, coverage as a band, no legend.
 * Places of labels and ticks are worked out here, so that nothing depends on a drawing library's defaults.
 */
import type { TopLevelSpec } from 'vega-lite';
import type { Series } from '../calculation/types';
import { placeLabels, sampleRoom, type CurvePixels, type LabelPlace } from './labels';
import { palette, roleColours } from './palette';
import { axisScale, position, type AxisScale } from './scale';

export interface FigureOptions {
	/** Width of the whole drawing and height of its plot, in pixels (points in a document). */
	width: number;
	height: number;
	/** Common name of what the curves show: "temperature". Left out where one curve names itself. */
	yName?: string;
	/** A stated value, drawn as a dashed line across. */
	stated?: { value: number; label: string };
	/** The value that was assumed for what the axis shows, drawn as a hairline. */
	assumed?: { value: number; label: string };
	/** A stretch of the axis, such as the distances of an orbit. */
	range?: { low: number; high: number; label: string };
	/** Width of a text in pixels; an estimate by default, exact in the server's drawings. */
	measure?: (text: string, fontSize: number) => number;
	fontSize?: number;
}

interface Geometry {
	width: number;
	height: number;
	x: AxisScale;
	y: AxisScale;
	fontSize: number;
	measure: (text: string, fontSize: number) => number;
}

type Layer = Record<string, unknown>;

const estimateWidth = (text: string, fontSize: number): number => text.length * fontSize * 0.54;

const dashes: readonly (readonly number[])[] = [[], [7, 3], [2, 2.5], [9, 3, 2, 3]];

/** The drawing of one presented series (units as a reader sees them, see `presentSeries`). */
export function figureSpec(series: Series, options: FigureOptions): TopLevelSpec {
	const measure = options.measure ?? estimateWidth;
	const fontSize = options.fontSize ?? 11;
	const y = axisScale(
		[
			...series.curves.flatMap((curve) => [...curve.values, ...(curve.low ?? []), ...(curve.high ?? [])]),
			...(options.stated ? [options.stated.value] : [])
		],
		{ ticks: 5, round: true }
	);
	const x = axisScale(series.x.values, {
		ticks: options.width < 420 ? 4 : 7,
		round: false
	});
	const tickWidth = Math.max(...y.ticks.map((tick) => measure(tick.toFixed(y.decimals), fontSize)));
	const left = Math.ceil(tickWidth) + 10;
	const right = Math.ceil(measure((x.ticks.at(-1) ?? 0).toFixed(x.decimals), fontSize) / 2) + 4;
	const geometry: Geometry = {
		width: options.width - left - right,
		height: options.height,
		x,
		y,
		fontSize,
		measure
	};
	return {
		$schema: 'https://vega.github.io/schema/vega-lite/v6.json',
		width: geometry.width,
		height: geometry.height,
		padding: { left, right, top: 22, bottom: 40 },
		autosize: { type: 'none' },
		background: null,
		config: configOf(fontSize),
		resolve: { axis: { x: 'independent', y: 'independent' } },
		layer: [
			...rangeLayers(options, geometry),
			...series.curves.flatMap((curve) => bandLayers(series, curve, geometry)),
			...markLayers(options, geometry),
			...curveLayers(series, geometry),
			...nameLayers(series, options, geometry)
		]
	} as unknown as TopLevelSpec;

	function configOf(size: number): Layer {
		return {
			font: 'Noto Sans',
			aria: false,
			view: { stroke: null },
			axis: {
				grid: false,
				domainColor: palette.ink,
				domainWidth: 1,
				tickColor: palette.ink,
				tickSize: 4,
				labelColor: palette.ink,
				labelFontSize: size,
				labelFlush: false,
				labelBound: false,
				labelOverlap: false,
				titleColor: palette.ink,
				titleFontSize: size,
				titleFontWeight: 'normal'
			}
		};
	}
}

function dashed(pattern: readonly number[]): Layer {
	return pattern.length > 0 ? { strokeDash: [...pattern] } : {};
}

/** Name of an axis with its unit. */
function axisTitle(name: string, unit: string): string {
	return unit ? `${name}, ${unit}` : name;
}

function xEncoding(series: Series, g: Geometry): Layer {
	return {
		field: 'x',
		type: 'quantitative',
		scale: { domain: [g.x.low, g.x.high], nice: false, zero: false },
		axis: {
			values: g.x.ticks,
			format: `.${g.x.decimals}f`,
			title: axisTitle(series.x.name, series.x.unit),
			titleAnchor: 'end',
			titlePadding: 6
		}
	};
}

function yEncoding(series: Series, options: FigureOptions, g: Geometry): Layer {
	const first = series.curves[0];
	const name = options.yName ?? (series.curves.length === 1 ? first?.name : undefined) ?? '';
	const unit = first?.unit ?? '';
	return {
		field: 'y',
		type: 'quantitative',
		scale: { domain: [g.y.low, g.y.high], nice: false, zero: false },
		axis: {
			values: g.y.ticks,
			format: `.${g.y.decimals}f`,
			title: name ? axisTitle(name, unit) : unit || null,
			titleAngle: 0,
			titleAlign: 'left',
			titleAnchor: 'end',
			titleBaseline: 'bottom',
			titleX:
				-Math.ceil(Math.max(...g.y.ticks.map((tick) => g.measure(tick.toFixed(g.y.decimals), g.fontSize)))) -
				8,
			titleY: -8
		}
	};
}

function bandLayers(series: Series, curve: Series['curves'][number], g: Geometry): Layer[] {
	const { low, high } = curve;
	if (!low || !high) return [];
	return [
		{
			data: { values: series.x.values.map((x, i) => ({ x, low: low[i], high: high[i] })) },
			mark: { type: 'area', fill: roleColours(curve.role).band, fillOpacity: 0.25, clip: false },
			encoding: {
				x: { field: 'x', type: 'quantitative', scale: { domain: [g.x.low, g.x.high] }, axis: null },
				y: { field: 'low', type: 'quantitative', scale: { domain: [g.y.low, g.y.high] }, axis: null },
				y2: { field: 'high' }
			}
		}
	];
}

function rangeLayers(options: FigureOptions, g: Geometry): Layer[] {
	if (!options.range) return [];
	const left = Math.max(0, position(g.x, options.range.low, g.width));
	const right = Math.min(g.width, position(g.x, options.range.high, g.width));
	if (!(right > left)) return [];
	return [
		{
			data: { values: [{}] },
			mark: { type: 'rect', fill: palette.sunWash },
			encoding: { x: { value: left }, x2: { value: right }, y: { value: 0 }, y2: { value: g.height } }
		},
		textLayer(options.range.label, { x: left + 4, y: 10 }, palette.ink, 'left', g.fontSize - 1)
	];
}

function markLayers(options: FigureOptions, g: Geometry): Layer[] {
	const layers: Layer[] = [];
	if (options.assumed) {
		const at = position(g.x, options.assumed.value, g.width);
		if (at >= 0 && at <= g.width) {
			const flip = at + g.measure(options.assumed.label, g.fontSize - 1) + 6 > g.width;
			layers.push(
				ruleLayer({ x: { value: at }, y: { value: 0 }, y2: { value: g.height } }, []),
				textLayer(
					options.assumed.label,
					{ x: at + (flip ? -4 : 4), y: g.height - 7 },
					palette.soft,
					flip ? 'right' : 'left',
					g.fontSize - 1
				)
			);
		}
	}
	if (options.stated) {
		const at = g.height - position(g.y, options.stated.value, g.height);
		layers.push(
			ruleLayer({ y: { value: at }, x: { value: 0 }, x2: { value: g.width } }, [3, 3]),
			textLayer(options.stated.label, { x: g.width, y: at - 7 }, palette.ink, 'right', g.fontSize - 1)
		);
	}
	return layers;
}

function ruleLayer(encoding: Layer, dash: readonly number[]): Layer {
	return {
		data: { values: [{}] },
		mark: { type: 'rule', stroke: palette.soft, strokeWidth: 0.8, ...dashed(dash) },
		encoding
	};
}

function textLayer(
	text: string,
	place: { x: number; y: number },
	fill: string,
	align: 'left' | 'center' | 'right',
	fontSize: number
): Layer {
	return {
		data: { values: [{}] },
		mark: { type: 'text', text, fill, align, baseline: 'middle', fontSize },
		encoding: { x: { value: place.x }, y: { value: place.y } }
	};
}

/** Dash of each curve: curves of one role share a colour and are told apart by it. */
function dashesOf(series: Series): (readonly number[])[] {
	const seen: Record<string, number> = {};
	return series.curves.map(({ role }) => {
		const nth = seen[role] ?? 0;
		seen[role] = nth + 1;
		return dashes[nth % dashes.length] ?? [];
	});
}

function curveLayers(series: Series, g: Geometry): Layer[] {
	const patterns = dashesOf(series);
	return series.curves.map((curve, index) => {
		return {
			data: { values: series.x.values.map((x, i) => ({ i, x, y: curve.values[i] })) },
			mark: {
				type: 'line',
				stroke: roleColours(curve.role).line,
				strokeWidth: 1.6,
				...dashed(patterns[index] ?? []),
				strokeJoin: 'round',
				clip: false
			},
			encoding: {
				x: index === 0 ? xEncoding(series, g) : { ...xEncoding(series, g), axis: null },
				y: { field: 'y', type: 'quantitative', scale: { domain: [g.y.low, g.y.high] }, axis: null },
				order: { field: 'i', type: 'quantitative' }
			}
		};
	});
}

/** Labels at the curves, and the vertical axis, which stands in the same layer as it needs no data of its own. */
function nameLayers(series: Series, options: FigureOptions, g: Geometry): Layer[] {
	const layers: Layer[] = [
		{
			data: { values: [{ y: g.y.low }] },
			mark: { type: 'point', opacity: 0, size: 0 },
			encoding: { y: yEncoding(series, options, g), x: { value: 0 } }
		}
	];
	if (series.curves.length === 1 && options.yName === undefined) return layers;
	const curves = series.curves.map((curve) => curvePixels(series, curve, g));
	const patterns = dashesOf(series);
	const obstacles = markObstacles(options, g);
	const places = placeLabels(curves, { width: g.width, height: g.height }, obstacles);
	series.curves.forEach((curve, index) => {
		const place = places[index] ?? fallbackPlace(curves[index], index);
		const { line } = roleColours(curve.role);
		if (place.sample !== true) {
			layers.push(textLayer(curve.name, place, line, 'center', g.fontSize));
			return;
		}
		const left = place.x - ((curves[index]?.labelWidth ?? 0) + sampleRoom) / 2;
		layers.push(sampleLayer({ x: left, y: place.y }, line, patterns[index] ?? []));
		layers.push(textLayer(curve.name, { x: left + sampleRoom, y: place.y }, line, 'left', g.fontSize));
	});
	return layers;

	/** No free place: the names stand one below the other at the top right, each with a sample of its line. */
	function fallbackPlace(curve: CurvePixels | undefined, index: number): LabelPlace {
		return { x: g.width - ((curve?.labelWidth ?? 0) + sampleRoom) / 2, y: 8 + index * 14, sample: true };
	}
}

/** A short piece of a curve's line, before a name that does not stand at the curve. */
function sampleLayer(from: { x: number; y: number }, stroke: string, dash: readonly number[]): Layer {
	return {
		data: { values: [{}] },
		mark: { type: 'rule', stroke, strokeWidth: 1.6, ...dashed(dash) },
		encoding: { x: { value: from.x }, x2: { value: from.x + sampleRoom - 5 }, y: { value: from.y } }
	};
}

function curvePixels(series: Series, curve: Series['curves'][number], g: Geometry): CurvePixels {
	return {
		points: series.x.values.map((x, i) => ({
			x: position(g.x, x, g.width),
			y: g.height - position(g.y, curve.values[i] ?? 0, g.height)
		})),
		labelWidth: g.measure(curve.name, g.fontSize) + 4,
		labelHeight: g.fontSize
	};
}

function markObstacles(options: FigureOptions, g: Geometry) {
	const boxes = [];
	if (options.stated) {
		const at = g.height - position(g.y, options.stated.value, g.height);
		const width = g.measure(options.stated.label, g.fontSize - 1);
		boxes.push({ left: g.width - width, right: g.width, top: at - 14, bottom: at });
		boxes.push({ left: 0, right: g.width, top: at - 1, bottom: at + 1 });
	}
	if (options.assumed) {
		const at = position(g.x, options.assumed.value, g.width);
		const width = g.measure(options.assumed.label, g.fontSize - 1);
		boxes.push({ left: at - 1, right: at + 1, top: 0, bottom: g.height });
		boxes.push({ left: at - width - 6, right: at + width + 6, top: g.height - 16, bottom: g.height });
	}
	if (options.range) {
		const left = position(g.x, options.range.low, g.width);
		const width = g.measure(options.range.label, g.fontSize - 1);
		boxes.push({ left, right: left + width + 4, top: 0, bottom: 18 });
	}
	return boxes;
}
