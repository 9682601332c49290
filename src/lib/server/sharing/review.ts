import { dayText } from '$lib/report/dates';
import type { ReportModel } from '$lib/report/model';
import type { PersonSource } from '$lib/report/source';
import { documentWords as words } from '../../../../report-templates/shared/wording';

/** "Ada Tallis, senior consultant". */
export function named({ name, role }: PersonSource): string {
	return role ? `${name}, ${role}` : name;
}

/** Who checked it and what they said of it. A report that nobody else has read says so, whoever approved it. */
export function reviewStatement({ review }: Pick<ReportModel, 'review'>): string {
	if (review.kind === 'not-reviewed') return words.notReviewed;
	const by = named(review.by);
	const day = dayText(review.at);
	const said =
		review.kind === 'reviewed'
			? words.reviewed(by, day)
			: `${words.notReviewed} It was approved on ${day} by ${by}, who wrote it.`;
	return [said, review.remarks?.trim() ?? ''].filter(Boolean).join(' ');
}
