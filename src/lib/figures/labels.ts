/**
 * Names curves at the curve. Each label is tried at many places along its curve, above and below, and goes where it
 * covers no line and stands farthest from the other curves.
 */
export interface Point {
	x: number;
	y: number;
}

export interface CurvePixels {
	points: readonly Point[];
	labelWidth: number;
	labelHeight: number;
}

export interface LabelPlace {
	/** Centre of the label. */
	x: number;
	y: number;
	/** Away from its curve: room for a sample of the line is kept at its left, within the label's width. */
	sample?: boolean;
}

/** Room for a sample of the line before a name that stands away from its curve, pixels. */
export const sampleRoom = 24;

interface Box {
	left: number;
	right: number;
	top: number;
	bottom: number;
}

/** Least distance from a polyline to a box, 0 where it passes through; Infinity where it does not pass over or under. */
function verticalClearance(points: readonly Point[], box: Box): number {
	let clearance = Infinity;
	for (let i = 0; i + 1 < points.length; i += 1) {
		const a = points[i];
		const b = points[i + 1];
		if (!a || !b) continue;
		const left = Math.max(box.left, Math.min(a.x, b.x));
		const right = Math.min(box.right, Math.max(a.x, b.x));
		if (left > right) continue;
		const slope = b.x === a.x ? 0 : (b.y - a.y) / (b.x - a.x);
		const ys = b.x === a.x ? [a.y, b.y] : [a.y + slope * (left - a.x), a.y + slope * (right - a.x)];
		const top = Math.min(...ys);
		const bottom = Math.max(...ys);
		const gap = Math.max(box.top - bottom, top - box.bottom);
		clearance = Math.min(clearance, Math.max(0, gap));
	}
	return clearance;
}

function boxDistance(a: Box, b: Box): number {
	const dx = Math.max(0, a.left - b.right, b.left - a.right);
	const dy = Math.max(0, a.top - b.bottom, b.top - a.bottom);
	return Math.max(dx, dy);
}

interface Candidate {
	place: LabelPlace;
	box: Box;
	score: number;
}

function candidateAt(
	centre: Point,
	own: CurvePixels,
	others: readonly CurvePixels[],
	taken: readonly Box[],
	frame: { width: number; height: number }
): Candidate | undefined {
	const { labelHeight } = own;
	let best: Candidate | undefined;
	for (const side of [-1, 1]) {
		for (let gap = 2; gap <= 40; gap += 1) {
			const y = centre.y + side * (gap + labelHeight / 2);
			const half = own.labelWidth / 2;
			const box = {
				left: centre.x - half,
				right: centre.x + half,
				top: y - labelHeight / 2,
				bottom: y + labelHeight / 2
			};
			if (box.left < 2 || box.right > frame.width || box.top < 0 || box.bottom > frame.height - 2) continue;
			const toOwn = verticalClearance(own.points, box);
			if (toOwn < 2) continue;
			const toOthers = others.reduce((d, other) => Math.min(d, verticalClearance(other.points, box)), 40);
			const toLabels = taken.reduce((d, other) => Math.min(d, boxDistance(other, box)), 40);
			/* A name nearer to another curve would be read as that curve's. */
			if (toOthers < Math.max(3, toOwn + 1) || toLabels < 6) continue;
			const score = Math.min(toOthers, toLabels, 40) - gap;
			if (!best || score > best.score) best = { place: { x: centre.x, y }, box, score };
			break;
		}
	}
	return best;
}

/**
 * Places for the labels of the given curves inside a frame, in the same order; undefined where a label has no room,
 * and the caller must find another way to name that curve. All lengths in pixels.
 */
export function placeLabels(
	curves: readonly CurvePixels[],
	frame: { width: number; height: number },
	obstacles: readonly Box[] = []
): (LabelPlace | undefined)[] {
	const taken: Box[] = [...obstacles];
	return curves.map((curve, index) => {
		const others = curves.filter((_, other) => other !== index);
		let best: Candidate | undefined;
		const steps = 48;
		for (let i = 1; i < steps; i += 1) {
			const centre = pointAlong(curve.points, (i / steps) * frame.width);
			if (!centre) continue;
			const candidate = candidateAt(centre, curve, others, taken, frame);
			if (candidate && (!best || candidate.score > best.score + 0.5)) best = candidate;
		}
		best ??= freeCandidate(curve, curves, taken, frame);
		if (best) taken.push(best.box);
		return best?.place;
	});
}

/** Room for a label anywhere in the frame, topmost and rightmost first; a sample of the line then names the curve. */
function freeCandidate(
	curve: CurvePixels,
	curves: readonly CurvePixels[],
	taken: readonly Box[],
	frame: { width: number; height: number }
): Candidate | undefined {
	const { labelHeight } = curve;
	const half = (curve.labelWidth + sampleRoom) / 2;
	for (let y = labelHeight; y < frame.height - labelHeight; y += 4) {
		for (let x = frame.width - half; x > half; x -= 8) {
			const box = { left: x - half, right: x + half, top: y - labelHeight / 2, bottom: y + labelHeight / 2 };
			if (curves.some((other) => verticalClearance(other.points, box) < 4)) continue;
			if (taken.some((other) => boxDistance(other, box) < 4)) continue;
			return { place: { x, y, sample: true }, box, score: 0 };
		}
	}
	return undefined;
}

/** The first point of a polyline at a horizontal place. */
function pointAlong(points: readonly Point[], x: number): Point | undefined {
	for (let i = 0; i + 1 < points.length; i += 1) {
		const a = points[i];
		const b = points[i + 1];
		if (!a || !b || a.x === b.x) continue;
		if (x < Math.min(a.x, b.x) || x > Math.max(a.x, b.x)) continue;
		return { x, y: a.y + ((b.y - a.y) * (x - a.x)) / (b.x - a.x) };
	}
	return undefined;
}
