/** Words that every template prints alike. Numbers, names and dates arrive formatted. */
import type { ReportState } from '$lib/report';

export const documentWords = {
	draftMark: 'Draft, not issued',
	revision: (n: number) => `revision ${n}`,
	replaces: (revision: number, day: string | null) =>
		day ? `replaces revision ${revision} of ${day}` : `replaces revision ${revision}`,
	issued: (day: string) => `issued ${day}`,
	notIssued: 'not issued',
	verifyWith: (code: string) => `verify with code ${code}`,
	to: (name: string, contact: string) => (contact ? `To ${name}, attn. ${contact}` : `To ${name}`),
	noAddressee: 'To no particular addressee',
	commissionedBy: (who: string) => `commissioned or funded by ${who}`,
	project: (number: string) => `project ${number}`,
	order: (number: string) => `order ${number}`,
	pageOf: (n: number, of: number) => `page ${n} of ${of}`,
	inFull: 'To be reproduced only in full.',
	endMark: (id: string) => `End of ${id}`,

	datesInput: 'Inputs last changed',
	datesCalculation: 'Calculated',
	datesIssue: 'Issued',
	dateUnknown: 'not recorded',

	checkPageOne: (code: string) => [
		'Check this file at ',
		` with the code ${code}. A common PDF viewer will call the signer unknown, because the certificate comes from the service’s own authority; that page tells whether the file is the one that was issued, and whether it is still current.`
	],
	checkDraft:
		'This is a draft. It carries no signature and no code, may still change, and is not to be relied on.',

	question: 'The question',
	background: 'Background',
	answer: 'The answer',
	computed: 'As computed: ',
	appliesOnly: 'The result applies to the case described here and to no other.',
	quotation: (quotation: string, citation: string) => `The claim reads: “${quotation}” (${citation}).`,
	results: 'The results',
	resultsTable: {
		quantity: 'Quantity',
		average: 'What it averages',
		estimate: 'Estimate',
		uncertainty: 'Standard uncertainty',
		interval: (coverage: string | null) => (coverage ? `${coverage} coverage interval` : 'Coverage interval')
	},
	noUncertainty: 'not stated',
	assumptions: 'Assumptions',
	assumptionsTable: {
		quantity: 'Quantity',
		value: 'Value',
		uncertainty: 'Standard uncertainty',
		source: 'Source',
		share: 'Share'
	},
	exact: 'exact',
	note: (text: string) => `Note: ${text}`,
	inOwnUnit: (value: string) => `that is ${value}`,
	working: 'The working',
	workingWith: 'Each equation stands first in symbols, then with the best estimates put in.',
	figures: 'Figures',
	figureLabel: (n: number) => `Figure ${n}.`,
	figureBand: 'Shaded, where it is wider than the line: the coverage interval.',
	howSure: 'How sure',
	leftOut: 'What was left out',
	leftOutByAuthor: 'The author adds:',
	deviations: 'Departures from the method’s defaults',
	noDeviations: 'None: every option and default stands as the method has it.',
	scope: 'Scope and reliance',
	noScope: 'No scope was agreed in writing.',
	relianceAddressee: 'The addressee alone may rely on this document.',
	relianceNobody: 'Nobody is named who may rely on this document.',
	opinion: 'Opinion of the author',
	opinionMark: (author: string) =>
		`What follows is the opinion of ${author}. It is drawn from the results above and is not itself a result.`,
	reviewAndSignature: 'Review and signature',
	notReviewed: 'Not independently reviewed: nobody but its author has checked this document.',
	reviewed: (name: string, day: string) =>
		`Reviewed and approved by ${name}, on ${day}; the reviewer did not write it.`,
	approvedByAuthor: (name: string, day: string) =>
		`Not independently reviewed: approved by its author ${name}, on ${day}.`,
	statement: (text: string) => `Statement at the approval: “${text}”`,
	reviewerFigures: 'Figures of the reviewer, by another route',
	reviewerFiguresMark:
		'These were not computed by the methods of this report. Each stands for its reviewer alone; it is no result and changes none.',
	reviewerFiguresTable: {
		quantity: 'Beside the result',
		figure: 'Reviewer’s figure',
		averages: 'What it averages',
		route: 'Route, by whom, and what may be said'
	},
	written: (name: string) => `Written by ${name}.`,
	authorised: (name: string) => `Its issue was authorised by ${name}.`,
	signed: (organisation: string, time: string) =>
		`Signed electronically for ${organisation} with the organisation’s certificate issued by the service’s own authority (PAdES, baseline level B-B). The time of signing, ${time}, is claimed by the signer; no independent time stamp vouches for it.`,
	signatureMeaning:
		'The signature shows which organisation issued this file and that no byte has changed since. It says nothing about whether the content is right, it is not a qualified electronic signature, and it is no professional engineer’s seal.',
	unsigned: 'Unsigned: this is a draft.',
	signatureTooltip: (organisation: string) => `Electronic signature of ${organisation}`,
	history: 'Change history',
	historyTable: { revision: 'Revision', issued: 'Issued', reason: 'Reason and changes' },
	firstIssue: 'first issue',
	onlyIssue: (day: string) => `Revision 1, ${day}: first issue.`,
	howToCheck: 'How to check this document',
	checkOnline: (code: string) => [
		'On the page ',
		`, give the code ${code} or the file itself. It checks the signature and its certificate, whether anything was added after signing, and whether this revision is still current, and it recomputes the attached record and compares it figure by figure.`
	],
	checkOffline: (command: string) => [
		'The same works without the service, from a copy of its published code and its root certificate: ',
		command
	],
	rootFingerprint: 'The root certificate has the SHA-256 fingerprint ',
	attached: (file: string) =>
		`The attached file ${file} holds each request and its result in full. Its hash is SHA-256 over the canonical JSON of both (RFC 8785).`,
	record: 'Record',
	recordTable: { calculation: 'Calculation', method: 'Method', computed: 'Computed', record: 'Record' },
	methodVersion: (title: string, version: string) => `${title}, version ${version}`,
	engine: (engine: string, node: string) => `computing code ${engine} on Node.js ${node}`,
	notices: 'Notices',
	noticeSeal:
		'This is a calculation report. It is no sealed engineering document, and no licensed engineer’s review is implied. Where people, structures or equipment can be harmed, local codes and licensed practice come first, and authorities may require more than this document.',
	noticeAdvice: 'It is neither medical nor safety advice.',
	noticeErrors: (contact: string) =>
		`Errors found in it are to be reported to ${contact}; corrections are published as revisions.`,
	noticeErrorsPlain:
		'Errors found in it are to be reported to its author; corrections are published as revisions.',
	references: 'References',
	states: {
		draft: 'draft',
		'in-review': 'in review',
		returned: 'returned',
		approved: 'approved',
		issued: 'issued',
		superseded: 'superseded',
		withdrawn: 'withdrawn'
	} satisfies Record<ReportState, string>
};

export type DocumentWords = typeof documentWords;
