/** A small signed document and a throwaway authority for tests; the real ones come from the report renderer. */
import PDFDocument from 'pdfkit';
import type { Signer } from '../cms';
import { issueCertificate, localSigner, type Issued } from '../certificates';
import { addSignatureField, type PdfKitDocument, type SignatureField } from '../placeholder';
import { signPdf } from '../sign';

export interface TestAuthority {
	root: Issued;
	issuing: Issued;
	organisation: Issued;
	signer: Signer;
}

/** Root, issuing and organisation certificates made at `at`. */
export async function testAuthority(
	name = 'Tallis Brook Consulting',
	at = new Date()
): Promise<TestAuthority> {
	const service = (commonName: string) => ({ commonName, organisation: 'Noonmark' });
	const root = await issueCertificate('root', service('Noonmark Root'), at);
	const issuing = await issueCertificate('issuing', service('Noonmark Issuing'), at, root);
	const names = { commonName: name, organisation: name };
	const organisation = await issueCertificate('organisation', names, at, issuing);
	return {
		root,
		issuing,
		organisation,
		signer: localSigner(organisation.der, organisation.privateKey, [issuing.der])
	};
}

export interface SampleOptions {
	/** Content of the attached record.json; none if left out. */
	record?: string;
	field?: Partial<SignatureField> | null;
	lines?: readonly string[];
	/** Options handed to pdfkit, such as a password. */
	pdfkit?: Record<string, unknown>;
	visible?: boolean;
}

/** One page of text with an attached record and, unless `field` is null, the empty signature field. */
export function unsignedSample(options: SampleOptions = {}): Promise<Buffer> {
	const at = options.field?.signedAt ?? new Date();
	const doc = new PDFDocument({
		pdfVersion: '1.7',
		info: { Title: 'Sample memo', CreationDate: at, ModDate: at },
		...options.pdfkit
	});
	const chunks: Buffer[] = [];
	doc.on('data', (chunk: Buffer) => chunks.push(chunk));
	const done = new Promise<Buffer>((resolve, reject) => {
		doc.on('end', () => {
			resolve(Buffer.concat(chunks));
		});
		doc.on('error', reject);
	});
	doc.fontSize(12);
	for (const line of options.lines ?? ['The sunlit mean is -24.2 degC.']) doc.text(line);
	if (options.record !== undefined) {
		const attachment = {
			name: 'record.json',
			type: 'application/json',
			creationDate: at,
			modifiedDate: at,
			relationship: 'Data'
		};
		doc.file(Buffer.from(options.record), attachment);
	}
	if (options.field !== null) {
		const inner = doc as unknown as PdfKitDocument & {
			_font: NonNullable<SignatureField['appearance']>['font'];
		};
		addSignatureField(inner, {
			name: 'Tallis Brook Consulting',
			reason: 'Issued report',
			tooltip: 'Signature of Tallis Brook Consulting',
			signedAt: at,
			...(options.visible
				? {
						appearance: {
							rect: [72, 600, 220, 40],
							lines: ['Signed by Tallis Brook Consulting', 'no engineer’s seal'],
							font: inner._font,
							fontSize: 9
						}
					}
				: {}),
			...options.field
		});
	}
	doc.end();
	return done;
}

export async function signedSample(signer: Signer, options: SampleOptions = {}): Promise<Buffer> {
	return signPdf(await unsignedSample(options), signer);
}
