import { X509Certificate } from 'node:crypto';
import { database, type Database } from '../db';
import { rootPem } from '../signing/authority';

/** The service's root certificate for everybody, with what a reader compares it by. */
export interface PublishedRoot {
	pem: string;
	/** SHA-256 of the certificate, lower-case hexadecimal. */
	fingerprint: string;
	validTo: Date;
}

export async function publishedRoot(db: Database = database()): Promise<PublishedRoot> {
	const pem = await rootPem(db);
	const certificate = new X509Certificate(pem);
	return {
		pem: `${pem.trim()}\n`,
		fingerprint: certificate.fingerprint256.replaceAll(':', '').toLowerCase(),
		validTo: new Date(certificate.validTo)
	};
}
