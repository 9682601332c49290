// @peculiar/x509 refuses to load without it.
import 'reflect-metadata';
import {
	createHash,
	createPrivateKey,
	createPublicKey,
	randomBytes,
	sign as signBytes,
	type KeyObject
} from 'node:crypto';
import {
	AuthorityKeyIdentifierExtension,
	BasicConstraintsExtension,
	KeyUsageFlags,
	KeyUsagesExtension,
	Name,
	SubjectKeyIdentifierExtension,
	X509Certificate,
	X509CertificateGenerator,
	type Extension
} from '@peculiar/x509';
import type { Signer } from './cms';

const algorithm = { name: 'ECDSA', namedCurve: 'P-256', hash: 'SHA-256' } as const;

/** A certificate with its private key, before the key is sealed. */
export interface Issued {
	/** Distinguished name as text. */
	subject: string;
	/** Hexadecimal. */
	serial: string;
	pem: string;
	der: Buffer;
	/** SHA-256 of the DER, lower-case hexadecimal. */
	fingerprint: string;
	notBefore: Date;
	notAfter: Date;
	/** PKCS #8, DER. */
	privateKey: Buffer;
}

export type CertificateKind = 'root' | 'issuing' | 'organisation';

/** Years of validity. A report is judged at the time its signature states, so an expiry does not end it. */
const years: Record<CertificateKind, number> = { root: 30, issuing: 15, organisation: 5 };

async function extensions(
	kind: CertificateKind,
	publicKey: CryptoKey,
	issuerKey: CryptoKey
): Promise<Extension[]> {
	const identifiers = [
		await SubjectKeyIdentifierExtension.create(publicKey),
		await AuthorityKeyIdentifierExtension.create(issuerKey)
	];
	if (kind === 'organisation') {
		// No extended key usage: with document signing (RFC 9336) alone, NSS, and with it common viewers on Linux,
		// calls the certificate unfit.
		return [
			new BasicConstraintsExtension(false, undefined, true),
			new KeyUsagesExtension(KeyUsageFlags.digitalSignature | KeyUsageFlags.nonRepudiation, true),
			...identifiers
		];
	}
	return [
		new BasicConstraintsExtension(true, kind === 'root' ? 1 : 0, true),
		new KeyUsagesExtension(KeyUsageFlags.keyCertSign | KeyUsageFlags.cRLSign, true),
		...identifiers
	];
}

/** 16 random bytes, positive and never zero-led (RFC 5280, 4.1.2.2). */
function newSerial(): string {
	const bytes = randomBytes(16);
	bytes.writeUInt8((bytes.readUInt8(0) & 0x7f) | 0x40, 0);
	return bytes.toString('hex');
}

function addYears(from: Date, count: number): Date {
	const to = new Date(from);
	to.setUTCFullYear(to.getUTCFullYear() + count);
	return to;
}

/** Control characters have no place in a name, and X.520 bounds a name at 64 characters. */
function cleanName(name: string): string {
	const clean = Array.from(name.replace(/\p{Cc}+/gu, ' ').trim())
		.slice(0, 64)
		.join('')
		.trim();
	return clean === '' ? 'Unnamed organisation' : clean;
}

const readKey = (privateKey: Buffer): KeyObject =>
	createPrivateKey({ key: privateKey, format: 'der', type: 'pkcs8' });

async function importPair(privateKey: Buffer): Promise<{ privateKey: CryptoKey; publicKey: CryptoKey }> {
	const spki = createPublicKey(readKey(privateKey)).export({ type: 'spki', format: 'der' });
	return {
		privateKey: await crypto.subtle.importKey('pkcs8', Uint8Array.from(privateKey), algorithm, false, [
			'sign'
		]),
		publicKey: await crypto.subtle.importKey('spki', Uint8Array.from(spki), algorithm, true, ['verify'])
	};
}

/**
 * A certificate starts a day before it is made. A report's time is that of the request to issue it, and the
 * organisation's first certificate is made only when a worker comes to sign; clocks of two machines also differ.
 */
const backdatedMs = 86_400_000;

/**
 * A new P-256 key and a certificate for it, signed by the issuer, or by itself where there is none (a root).
 *
 * @param names common name and organisation; both are cut to 64 characters.
 * @param at when it is made; the end of the validity never lies behind the issuer's.
 */
export async function issueCertificate(
	kind: CertificateKind,
	names: { commonName: string; organisation: string },
	at: Date,
	issuer?: Pick<Issued, 'der' | 'privateKey'>
): Promise<Issued> {
	const keys = await crypto.subtle.generateKey(algorithm, true, ['sign', 'verify']);
	// As UTF8String objects: as plain text the library reads quotation marks and # as syntax.
	const subject = new Name([
		{ O: [{ utf8String: cleanName(names.organisation) }] },
		{ CN: [{ utf8String: cleanName(names.commonName) }] }
	]);
	const parent = issuer && new X509Certificate(Uint8Array.from(issuer.der));
	const issuerKeys = issuer === undefined ? keys : await importPair(issuer.privateKey);
	const notBefore = new Date(Math.floor((at.getTime() - backdatedMs) / 1000) * 1000);
	const notAfter = addYears(notBefore, years[kind]);
	const certificate = await X509CertificateGenerator.create({
		serialNumber: newSerial(),
		subject,
		issuer: parent?.subjectName ?? subject,
		notBefore,
		notAfter: parent !== undefined && parent.notAfter < notAfter ? parent.notAfter : notAfter,
		publicKey: keys.publicKey,
		signingKey: issuerKeys.privateKey,
		signingAlgorithm: algorithm,
		extensions: await extensions(kind, keys.publicKey, issuerKeys.publicKey)
	});
	const der = Buffer.from(certificate.rawData);
	return {
		subject: certificate.subject,
		serial: certificate.serialNumber,
		pem: certificate.toString('pem'),
		der,
		fingerprint: createHash('sha256').update(der).digest('hex'),
		notBefore: certificate.notBefore,
		notAfter: certificate.notAfter,
		privateKey: Buffer.from(await crypto.subtle.exportKey('pkcs8', keys.privateKey))
	};
}

/**
 * A signer that holds its key in memory.
 * @param privateKey PKCS #8, DER.
 */
export function localSigner(certificate: Buffer, privateKey: Buffer, issuers: readonly Buffer[]): Signer {
	const key = readKey(privateKey);
	return {
		certificate,
		issuers,
		algorithm: key.asymmetricKeyType === 'ec' ? 'ecdsa-with-sha256' : 'sha256-with-rsa',
		sign: (data) => signBytes('sha256', data, key)
	};
}
