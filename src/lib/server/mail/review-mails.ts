import { compose, linkTo, type Recipient } from './compose';
import type { Mail } from './transport';

/** What a mail about a report says of it. */
export interface ReportFacts {
	id: string;
	/** "TB-0412, revision 1". */
	name: string;
	title: string;
	organisation: string;
	/** The person may act in another one when they follow the link. */
	organisationId: string;
}

const guestNote =
	'You were asked as somebody from outside the organisation: signing in shows you this dossier and nothing else.';

const pageOf = ({ id, organisationId }: ReportFacts, part = ''): string =>
	linkTo(`/reports/${id}${part}?organisation=${organisationId}`);

/** To those asked to review. */
export function reviewAskedMail(
	to: Recipient,
	report: ReportFacts,
	asked: { by: string; note: string; guest: boolean }
): Mail {
	return compose(
		to,
		`Please review ${report.name}`,
		[
			`${asked.by} of ${report.organisation} asks you to review the report “${report.title}” (${report.name}). Read it here, remark on lines, then return or approve it:`,
			...(asked.note === '' ? [] : [`${asked.by} asks you to look at this: ${asked.note}`]),
			...(asked.guest ? [guestNote] : [])
		],
		{ label: 'Review this report', href: pageOf(report, '/review') }
	);
}

/** To who sent and wrote it. */
export function reviewReturnedMail(
	to: Recipient,
	report: ReportFacts,
	decision: { by: string; statement: string }
): Mail {
	return compose(
		to,
		`Returned: ${report.name}`,
		[
			`${decision.by} returned the report “${report.title}” (${report.name}). The remarks stand beside its lines:`,
			`The reasons: ${decision.statement}`
		],
		{ label: 'See the remarks', href: pageOf(report, '/review') }
	);
}

/** To who sent and wrote it. */
export function reviewApprovedMail(
	to: Recipient,
	report: ReportFacts,
	decision: { by: string; statement: string }
): Mail {
	return compose(
		to,
		`Approved: ${report.name}`,
		[
			`${decision.by} approved the report “${report.title}” (${report.name}). It can be issued now:`,
			`The statement: ${decision.statement}`,
			'The approval covers the report as it stands. Where anything that it prints is changed before the issue, the approval is void.'
		],
		{ label: 'Open the report', href: pageOf(report) }
	);
}

/** To author and approver. */
export function approvalVoidMail(to: Recipient, report: ReportFacts, reason: string): Mail {
	return compose(
		to,
		`The approval of ${report.name} is void`,
		[
			`The report “${report.title}” (${report.name}) was approved and is a draft again:`,
			reason,
			'To be issued it has to be sent for review once more.'
		],
		{ label: 'Open the report', href: pageOf(report) }
	);
}

/** To the author and to who reviewed it. */
export function reportIssuedMail(to: Recipient, report: ReportFacts, code: string): Mail {
	return compose(
		to,
		`Issued: ${report.name}`,
		[
			`The report “${report.title}” (${report.name}) of ${report.organisation} was issued and signed. It is kept here:`,
			`Its verification code is ${code}. Anybody who has the file can check it: ${linkTo('/verify')}`
		],
		{ label: 'Open the report', href: pageOf(report) }
	);
}
