import { z } from 'zod';

const line = (most: number, what: string) =>
	z
		.string()
		.default('')
		.transform((text) => text.replaceAll('\0', '').replace(/\s+/g, ' ').trim())
		.pipe(z.string().max(most, `Shorten ${what} to ${most} characters.`));

const paragraph = (most: number, what: string) =>
	z
		.string()
		.default('')
		.transform((text) => text.replaceAll('\0', '').replace(/\r\n?/g, '\n').trim())
		.pipe(z.string().max(most, `Shorten ${what} to ${most.toLocaleString('en-GB')} characters.`));

/** What a person writes about a dossier. Fields that are not named here never reach the database. */
export const dossierInput = z.object({
	title: line(160, 'the title').pipe(
		z.string().min(1, 'Give the dossier a title, such as the place and the thing asked about.')
	),
	question: paragraph(4000, 'the question'),
	client: line(160, 'the client’s name'),
	clientContact: line(240, 'the contact'),
	scope: paragraph(4000, 'the agreed scope'),
	reliance: paragraph(2000, 'who may rely on the report'),
	projectNumber: line(60, 'the project number'),
	orderNumber: line(60, 'the order number')
});

export type DossierInput = z.infer<typeof dossierInput>;
export type DossierField = keyof DossierInput;

/** The save that an edit started from. */
export const startedFrom = z.coerce.number().int().min(1);

export const emptyDossier: DossierInput = {
	title: '',
	question: '',
	client: '',
	clientContact: '',
	scope: '',
	reliance: '',
	projectNumber: '',
	orderNumber: ''
};
