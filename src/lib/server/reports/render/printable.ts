import type { ReportModel } from '$lib/report';
import { splitByGlyphs, UnprintableTextError } from '$lib/server/typesetting/fonts';

/** What is printed of a model; the record is attached, not set in type. */
function texts(value: unknown, key = ''): string[] {
	if (key === 'request' || key === 'result') return [];
	if (typeof value === 'string') return [value];
	if (Array.isArray(value)) return value.flatMap((item: unknown) => texts(item));
	if (value === null || typeof value !== 'object') return [];
	return Object.entries(value).flatMap(([name, item]) => texts(item, name));
}

/** The first text that no typeface of reports can print, so that an author hears of it before the issue; else null. */
export function unprintableText(model: ReportModel): UnprintableTextError | null {
	for (const text of texts(model)) {
		try {
			splitByGlyphs(text, 'Noto Serif');
			splitByGlyphs(text, 'Noto Sans');
		} catch (error) {
			if (error instanceof UnprintableTextError) return error;
			throw error;
		}
	}
	return null;
}
