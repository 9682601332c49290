import type { ReviewLine } from '$lib/server/reviews/types';

/** Neighbouring lines that are set alike: prose, or a table of facts, results or assumptions. */
export interface LineBlock {
	set: 'prose' | 'facts' | 'outputs' | 'inputs';
	lines: ReviewLine[];
}

/** Consecutive lines under one heading. */
export interface LineSection {
	/** Id of its element. */
	id: string;
	title: string;
	blocks: LineBlock[];
	changes: number;
	/** Remarks that nobody has settled. */
	open: number;
}

const prose = /^(text\.(?!commissionedBy)|report\.computed|dossier\.(scope|reliance))/;

function settingOf({ place }: ReviewLine): LineBlock['set'] {
	if (place.includes('/output:')) return 'outputs';
	if (place.includes('/input:')) return 'inputs';
	return place.startsWith('run:') || prose.test(place) ? 'prose' : 'facts';
}

/** Neighbours for which `alike` gives the same, together. */
function together<T, K>(items: readonly T[], alike: (item: T) => K): { key: K; items: T[] }[] {
	const groups: { key: K; items: T[] }[] = [];
	for (const item of items) {
		const key = alike(item);
		const last = groups.at(-1);
		if (last !== undefined && last.key === key) last.items.push(item);
		else groups.push({ key, items: [item] });
	}
	return groups;
}

/** The report's lines in their order, by heading; a heading that comes again later is a section of its own. */
export function sectionsOf(lines: readonly ReviewLine[]): LineSection[] {
	return together(lines, ({ section }) => section).map(({ key, items }, i) => ({
		id: `part-${i + 1}`,
		title: key,
		blocks: together(items, settingOf).map((block) => ({ set: block.key, lines: block.items })),
		changes: items.filter(({ changed }) => changed !== null).length,
		open: items.flatMap(({ comments }) => comments).filter(({ settledAt }) => settledAt === null).length
	}));
}
