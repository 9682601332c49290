/** Scope, opinion, review, signature, history, how to check, notices and references: what stands behind the answer. */
import { dayText, instantText, personText, recordFileName, type ReportModel } from '$lib/report';
import { leading, colours, sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { dataTable, numberCell, wordsCell } from './table';
import { documentWords as words } from './wording';

export function scopeAndReliance(kit: DocumentKit, model: ReportModel): Node[] {
	return [
		kit.heading(words.scope),
		...(model.scope.trim() ? kit.paragraphs(model.scope) : [kit.paragraph(words.noScope)]),
		...(model.reliance.trim()
			? kit.paragraphs(model.reliance)
			: [kit.paragraph(model.addressee ? words.relianceAddressee : words.relianceNobody)])
	];
}

/** Opinion stands in a section of its own, with its author, apart from the results. */
export function opinion(kit: DocumentKit, model: ReportModel): Node[] {
	if (!model.text.commentary.trim()) return [];
	return [
		kit.heading(words.opinion),
		kit.paragraph(words.opinionMark(model.author.name), { italics: true }),
		...kit.paragraphs(model.text.commentary)
	];
}

/** What the report says of its review, bold; and the words of whoever approved it, as theirs. */
function review(kit: DocumentKit, model: ReportModel): Node[] {
	const { review: given } = model;
	if (given.kind === 'not-reviewed') return [kit.paragraph([{ strong: words.notReviewed }])];
	const by = personText(given.by);
	const day = dayText(given.at);
	const said = given.kind === 'reviewed' ? words.reviewed(by, day) : words.approvedByAuthor(by, day);
	const statement = given.remarks?.trim() ?? '';
	return [
		kit.paragraph([{ strong: said }]),
		...(statement === '' ? [] : kit.paragraphs(words.statement(statement)))
	];
}

/** Who wrote, reviewed and authorised it, and exactly what the signature is. `signedAt` is null for a draft. */
export function reviewAndSignature(kit: DocumentKit, model: ReportModel, signedAt: string | null): Node[] {
	const by = [
		words.written(personText(model.author)),
		...(model.authoriser ? [words.authorised(personText(model.authoriser))] : [])
	];
	const signature = signedAt
		? kit.paragraph(
				words.signed(model.organisation.name, instantText(signedAt)),
				{},
				{ signaturePlace: true }
			)
		: kit.paragraph(words.unsigned);
	return [
		kit.heading(words.reviewAndSignature),
		...review(kit, model),
		kit.paragraph(by.join(' ')),
		signature,
		...(signedAt ? [kit.paragraph(words.signatureMeaning)] : [])
	];
}

export function changeHistory(kit: DocumentKit, model: ReportModel): Node[] {
	const [first, ...later] = model.history;
	if (!first) return [];
	if (later.length === 0 && first.revision === 1) {
		const day = first.issuedAt ? dayText(first.issuedAt) : words.notIssued;
		return [kit.heading(words.history), kit.paragraph(words.onlyIssue(day))];
	}
	return [
		kit.heading(words.history),
		dataTable(
			kit,
			[
				{ title: words.historyTable.revision, width: 60 },
				{ title: words.historyTable.issued, width: 110 },
				{ title: words.historyTable.reason, width: '*' }
			],
			model.history.map((entry) => [
				numberCell(kit, String(entry.revision)),
				wordsCell(kit, entry.issuedAt ? dayText(entry.issuedAt) : words.notIssued),
				wordsCell(kit, entry.reason || (entry.revision === 1 ? words.firstIssue : ''), entry.changes ?? [])
			])
		)
	];
}

/** Hex digits in groups of eight, which a line can break and a reader can compare. */
function grouped(hex: string): string {
	return hex.replace(/(.{8})(?=.)/g, '$1 ');
}

const mono = { font: 'Noto Sans Mono', fontSize: sizes.small } as const;

function recordTable(kit: DocumentKit, model: ReportModel): Node {
	return dataTable(
		kit,
		[
			{ title: words.recordTable.calculation, width: 120 },
			{ title: words.recordTable.computed, width: 132 },
			{ title: words.recordTable.record, width: '*' }
		],
		model.runs.map((run) => [
			wordsCell(kit, run.title, [words.methodVersion(run.method.title, run.method.version)]),
			wordsCell(kit, instantText(run.computedAt), [words.engine(run.engineVersion, run.nodeVersion)]),
			{ text: kit.runs(grouped(run.record.replace(/^sha256:/, '')), mono) }
		])
	);
}

export function howToCheck(kit: DocumentKit, model: ReportModel, draft: boolean): Node[] {
	const nodes: Node[] = [kit.heading(words.howToCheck)];
	const { verification } = model;
	if (!draft && verification) {
		const [before = '', after = ''] = words.checkOnline(verification.code);
		const body = { fontSize: sizes.body };
		const [offline = '', command = ''] = words.checkOffline(
			'npm run -s verify -- report.pdf --root root.pem'
		);
		nodes.push(
			kit.paragraph(
				'',
				{},
				{
					text: [
						...kit.runs(before, body),
						...kit
							.runs(verification.address, { ...body, color: colours.shade })
							.map((run) => ({ ...run, link: verification.address })),
						...kit.runs(after, body)
					]
				}
			),
			kit.paragraph(
				'',
				{},
				{
					text: [
						...kit.runs(offline, body),
						...kit.runs(command, mono),
						...kit.runs(`. ${words.rootFingerprint}`, body),
						...kit.runs(`${grouped(verification.rootFingerprint)}`, mono),
						...kit.runs('.', body)
					]
				}
			)
		);
	} else {
		nodes.push(kit.paragraph(words.checkDraft));
	}
	return [...nodes, kit.paragraph(words.attached(recordFileName)), recordTable(kit, model)];
}

export function notices(kit: DocumentKit, model: ReportModel): Node[] {
	const contact = model.organisation.contact?.trim();
	return [
		kit.heading(words.notices),
		kit.paragraph(
			[
				words.noticeSeal,
				words.noticeAdvice,
				words.inFull,
				contact ? words.noticeErrors(contact) : words.noticeErrorsPlain
			].join(' ')
		)
	];
}

/** Works in order of citation; called last, when all have been cited. */
export function references(kit: DocumentKit): Node[] {
	const style = { font: 'Noto Sans', fontSize: sizes.small } as const;
	if (kit.cited.length === 0) return [];
	return [
		kit.heading(words.references),
		{
			stack: kit.cited.map((reference, i) => {
				const address = reference.doi ? `https://doi.org/${reference.doi}` : reference.url;
				return {
					columns: [
						{ width: 24, text: kit.runs(`[${i + 1}]`, style), id: `reference-${i + 1}`, role: 'Lbl' },
						{
							width: '*',
							text: [
								...kit.runs(reference.text, style),
								...(address
									? [
											...kit.runs(' ', style),
											...kit
												.runs(address, { ...style, color: colours.shade })
												.map((run) => ({ ...run, link: address }))
										]
									: [])
							],
							lineHeight: leading,
							role: 'LBody'
						}
					],
					role: 'LI',
					margin: [0, 0, 0, 3]
				};
			}),
			role: 'L'
		}
	];
}

export function endMark(kit: DocumentKit, id: string): Node {
	return {
		text: kit.runs(words.endMark(id), { font: 'Noto Sans', fontSize: sizes.small, bold: true }),
		alignment: 'center',
		margin: [0, 12, 0, 0],
		role: 'P'
	};
}
