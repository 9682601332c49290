import { X509Certificate } from 'node:crypto';
import { BitString } from 'asn1js';
import { BasicConstraints, Certificate } from 'pkijs';
import { oids } from '../signing/oids';
import { isStrongKey } from './cms';

export type Trust = 'trusted' | 'unknown' | 'not-checked';

const basicConstraints = '2.5.29.19';
const keyUsage = '2.5.29.15';
/** Extensions whose meaning is checked here or that restrict nothing; a critical one beyond these is refused. */
const known = new Set([basicConstraints, keyUsage, '2.5.29.14', '2.5.29.35', '2.5.29.37']);
const strongSignatures: readonly string[] = [
	oids.ecdsaWithSha256,
	oids.ecdsaWithSha384,
	oids.ecdsaWithSha512,
	oids.sha256WithRsa,
	oids.sha384WithRsa,
	oids.sha512WithRsa
];

/** Bits of the key usage extension's first octet (RFC 5280, 4.2.1.3). */
const usage = { digitalSignature: 0x80, nonRepudiation: 0x40, keyCertSign: 0x04 };

interface Constraints {
	ca: boolean;
	pathLength: number;
	usage: number;
}

/** What a certificate may be used for. @throws Error where an extension is unknown and critical, or malformed. */
function readConstraints(certificate: X509Certificate): Constraints {
	const parsed = Certificate.fromBER(Uint8Array.from(certificate.raw).buffer);
	const out: Constraints = { ca: false, pathLength: Infinity, usage: 0 };
	for (const extension of parsed.extensions ?? []) {
		if (extension.critical && !known.has(extension.extnID)) throw new Error('unknown critical extension');
		if (extension.extnID === basicConstraints && extension.parsedValue instanceof BasicConstraints) {
			out.ca = extension.parsedValue.cA;
			const length = extension.parsedValue.pathLenConstraint;
			if (typeof length === 'number') out.pathLength = length;
		}
		if (extension.extnID === keyUsage && extension.parsedValue instanceof BitString) {
			out.usage = extension.parsedValue.valueBlock.valueHexView[0] ?? 0;
		}
	}
	if (!strongSignatures.includes(parsed.signatureAlgorithm.algorithmId)) throw new Error('weak signature');
	return out;
}

const covers = (certificate: X509Certificate, at: Date): boolean =>
	Date.parse(certificate.validFrom) <= at.getTime() && at.getTime() <= Date.parse(certificate.validTo);

const issuedBy = (certificate: X509Certificate, issuer: X509Certificate): boolean =>
	certificate.checkIssued(issuer) && isStrongKey(issuer.publicKey) && certificate.verify(issuer.publicKey);

/** Whether each certificate, signer first and root last, was issued by the next and may be used as it is. */
function holdsTogether(path: readonly X509Certificate[], at: Date): boolean {
	return path.every((certificate, depth) => {
		const constraints = readConstraints(certificate);
		if (!covers(certificate, at)) return false;
		const next = path[depth + 1];
		if (next !== undefined && !issuedBy(certificate, next)) return false;
		if (depth === 0) {
			const signs = usage.digitalSignature | usage.nonRepudiation;
			return !constraints.ca && (constraints.usage & signs) !== 0;
		}
		const certifies = (constraints.usage & usage.keyCertSign) !== 0;
		return constraints.ca && certifies && constraints.pathLength >= depth - 1;
	});
}

const safely = (check: () => boolean): boolean => {
	try {
		return check();
	} catch {
		return false;
	}
};

/** Every certificate in a PEM text. @throws Error if there is none, or one is malformed. */
export function readRoots(pem: string): X509Certificate[] {
	const blocks = pem.match(/-----BEGIN CERTIFICATE-----[^-]+-----END CERTIFICATE-----/g) ?? [];
	if (blocks.length === 0) throw new Error('The root file holds no certificate in PEM form.');
	return blocks.map((block) => new X509Certificate(block));
}

/**
 * Judges the certificates at a given time (validity, authority flags, key usage, path length, signatures) up to one
 * of the roots; without roots, among themselves.
 *
 * Names decide nothing: another authority of the same name fails at the signature.
 */
export function checkChain(
	signer: X509Certificate,
	issuers: readonly X509Certificate[],
	roots: readonly X509Certificate[] | undefined,
	at: Date
): Trust {
	const inside = [signer, ...issuers];
	if (roots === undefined) {
		return safely(() => holdsTogether(inside, at)) ? 'not-checked' : 'unknown';
	}
	const trusted = roots.some((root) =>
		safely(() => issuedBy(root, root) && holdsTogether([...inside, root], at))
	);
	return trusted ? 'trusted' : 'unknown';
}
