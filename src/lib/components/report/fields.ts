import type { ReportText } from '$lib/report/text';

/** Parts of a report that its author writes, in the order in which they are asked. */
export const writtenFields = [
	{ id: 'question', label: 'The question, as the reader should see it', rows: 3, help: '' },
	{
		id: 'background',
		label: 'Background',
		rows: 3,
		help: 'Opening lines before the answer. May stay empty.'
	},
	{
		id: 'answer',
		label: 'The answer',
		rows: 4,
		help: 'Composed from the result. The computed figures stand below it in the report, whatever is written here.'
	},
	{
		id: 'commentary',
		label: 'Commentary',
		rows: 4,
		help: 'Opinion and advice; the report marks it as yours.'
	},
	{ id: 'leftOut', label: 'What was left out', rows: 3, help: 'Beyond what the method itself lists.' },
	{ id: 'commissionedBy', label: 'Commissioned or paid for by', rows: 1, help: 'If it is to be said.' }
] as const;

/** What a form that came back with faults had in its text fields; empty for a form that is opened anew. */
export function typedText(values: Readonly<Record<string, string>> | undefined): Partial<ReportText> {
	if (values === undefined) return {};
	const { question, background, answer, commentary, leftOut, commissionedBy } = values;
	const withoutAddressee = values.withoutAddressee === 'yes';
	return { question, background, answer, commentary, leftOut, commissionedBy, withoutAddressee };
}
