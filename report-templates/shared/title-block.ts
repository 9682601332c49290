/** Head of the first page: who issues, what it is, for whom, when, and how to check it. */
import { dayText, instantText, type ReportModel } from '$lib/report';
import { leading, colours, sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { documentWords as words } from './wording';

const sans = { font: 'Noto Sans', fontSize: sizes.table } as const;

function line(kit: DocumentKit, text: string, style = {}, node: Node = {}): Node {
	return { text: kit.runs(text, { ...sans, ...style }), lineHeight: leading, role: 'P', ...node };
}

function replaced(model: ReportModel): string[] {
	if (model.revision < 2) return [];
	const before = model.history.find((entry) => entry.revision === model.revision - 1);
	return [words.replaces(model.revision - 1, before?.issuedAt ? dayText(before.issuedAt) : null)];
}

function identity(kit: DocumentKit, model: ReportModel, kind: string, draft: boolean): Node {
	const lines = [
		`${kind} ${model.number}, ${words.revision(model.revision)}`,
		...replaced(model),
		draft || !model.dates.issue ? words.notIssued : words.issued(dayText(model.dates.issue)),
		...(draft || !model.verification ? [] : [words.verifyWith(model.verification.code)])
	];
	return { width: 210, stack: lines.map((text) => line(kit, text, {}, { alignment: 'right' })) };
}

function letterhead(kit: DocumentKit, model: ReportModel): Node {
	const { organisation } = model;
	return {
		width: '*',
		stack: [
			line(kit, organisation.name, { bold: true }),
			...organisation.address.filter((text) => text.trim()).map((text) => line(kit, text)),
			...(organisation.registrationLine
				? [line(kit, organisation.registrationLine, { color: colours.soft })]
				: [])
		]
	};
}

function addressLine(model: ReportModel): string {
	const parts = [
		model.addressee ? words.to(model.addressee.name, model.addressee.contact) : words.noAddressee,
		...(model.text.commissionedBy.trim() ? [words.commissionedBy(model.text.commissionedBy.trim())] : []),
		...(model.projectNumber.trim() ? [words.project(model.projectNumber.trim())] : []),
		...(model.orderNumber.trim() ? [words.order(model.orderNumber.trim())] : [])
	];
	return parts.join(' · ');
}

function dates(kit: DocumentKit, model: ReportModel, draft: boolean): Node {
	const at = (instant: string | null) => (instant ? instantText(instant) : words.dateUnknown);
	const entries = [
		[words.datesInput, at(model.dates.inputData)],
		[words.datesCalculation, at(model.dates.calculation)],
		[words.datesIssue, draft || !model.dates.issue ? words.notIssued : at(model.dates.issue)]
	];
	return {
		columns: entries.map(([label, value]) => ({
			width: '*',
			stack: [
				line(kit, label ?? '', { color: colours.soft, fontSize: sizes.small }),
				line(kit, value ?? '', { fontSize: sizes.small })
			]
		})),
		columnGap: 10,
		margin: [0, 6, 0, 0]
	};
}

function rule(): Node {
	return {
		canvas: [{ type: 'line', x1: 0, y1: 0, x2: 463.28, y2: 0, lineWidth: 0.5, lineColor: colours.rule }],
		margin: [0, 6, 0, 5]
	};
}

function check(kit: DocumentKit, model: ReportModel, draft: boolean): Node {
	if (draft || !model.verification) return line(kit, words.checkDraft, { bold: true });
	const { address, code } = model.verification;
	const [before = '', after = ''] = words.checkPageOne(code);
	return {
		text: [
			...kit.runs(before, sans),
			...kit.runs(address, { ...sans, color: colours.shade }).map((run) => ({ ...run, link: address })),
			...kit.runs(after, sans)
		],
		lineHeight: leading,
		role: 'P'
	};
}

/** Letterhead, identity, title, addressee, dates, and the sentence that says how to check the file. */
export function titleBlock(kit: DocumentKit, model: ReportModel, kind: string, draft: boolean): Node[] {
	return [
		{
			columns: [letterhead(kit, model), identity(kit, model, kind, draft)],
			columnGap: 16
		},
		{
			text: kit.runs(model.title, { bold: true, fontSize: sizes.title }),
			lineHeight: 1.12,
			margin: [0, 18, 0, 4],
			role: 'H1',
			headlineLevel: 1
		},
		line(kit, addressLine(model), { color: colours.soft }),
		dates(kit, model, draft),
		rule(),
		check(kit, model, draft),
		rule()
	];
}
