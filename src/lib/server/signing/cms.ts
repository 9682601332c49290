import { createHash } from 'node:crypto';
import { Constructed, ObjectIdentifier, OctetString, Sequence, Set as AsnSet, fromBER } from 'asn1js';
import {
	AlgorithmIdentifier,
	Attribute,
	Certificate,
	ContentInfo,
	EncapsulatedContentInfo,
	IssuerAndSerialNumber,
	SignedAndUnsignedAttributes,
	SignedData,
	SignerInfo
} from 'pkijs';
import { oids } from './oids';

/** What signs: a private key at hand, or a key service that is handed the bytes. */
export interface Signer {
	/** DER of the signing certificate. */
	certificate: Buffer;
	/** DER of the certificates between it and the root, nearest first; the root itself stays out. */
	issuers: readonly Buffer[];
	algorithm: 'ecdsa-with-sha256' | 'sha256-with-rsa';
	/** SHA-256 with ECDSA (signature as DER) or with RSA (PKCS #1 v1.5) over the data. */
	sign(data: Buffer): Buffer | Promise<Buffer>;
}

const compare = (a: Uint8Array, b: Uint8Array): number => Buffer.compare(a, b);

const der = (block: { toBER(): ArrayBuffer }): Buffer => Buffer.from(block.toBER());

/** Orders the members of a SET OF as DER asks (X.690, 11.6). */
export function sortSet(members: readonly Uint8Array[]): Uint8Array[] {
	return [...members].sort(compare);
}

function attribute(type: string, value: ObjectIdentifier | OctetString | Sequence): Attribute {
	return new Attribute({ type, values: [value] });
}

/**
 * signing-certificate-v2 (RFC 5035) over the whole chain: the first names the signer, the others bind the issuers,
 * so that no certificate in the file can be exchanged. SHA-256 is the default and therefore not written.
 */
function signingCertificate(chain: readonly Buffer[]): Sequence {
	const ids = chain.map((certificate) => {
		const hash = createHash('sha256').update(certificate).digest();
		return new Sequence({ value: [new OctetString({ valueHex: Uint8Array.from(hash).buffer })] });
	});
	return new Sequence({ value: [new Sequence({ value: ids })] });
}

/**
 * The signed attributes of PAdES B-B (EN 319 142-1): content-type, message-digest and signing-certificate-v2, in
 * DER order. No signing-time: the dictionary's M carries the claimed time.
 */
function signedAttributes(messageDigest: Buffer, chain: readonly Buffer[]): Attribute[] {
	const attributes = [
		attribute(oids.contentType, new ObjectIdentifier({ value: oids.data })),
		attribute(oids.messageDigest, new OctetString({ valueHex: Uint8Array.from(messageDigest).buffer })),
		attribute(oids.signingCertificateV2, signingCertificate(chain))
	];
	return attributes.sort((a, b) => compare(der(a.toSchema()), der(b.toSchema())));
}

const readCertificate = (bytes: Buffer): Certificate => Certificate.fromBER(Uint8Array.from(bytes).buffer);

const signatureAlgorithms = {
	'ecdsa-with-sha256': () => new AlgorithmIdentifier({ algorithmId: oids.ecdsaWithSha256 }),
	// RFC 8017 wants the NULL parameter for RSA; RFC 5758 wants none for ECDSA.
	'sha256-with-rsa': () =>
		new AlgorithmIdentifier({
			algorithmId: oids.sha256WithRsa,
			algorithmParams: fromBER(Uint8Array.of(5, 0).buffer).result
		})
};

/**
 * A detached CMS SignedData (RFC 5652) over content of the given SHA-256 digest, as DER.
 *
 * A time-stamp of the signature value (B-T) would go in as `unsignedAttrs` of the one SignerInfo: it needs the
 * signature and nothing else, and changes nothing that was signed.
 */
export async function buildCms(messageDigest: Buffer, signer: Signer): Promise<Buffer> {
	const chain = [signer.certificate, ...signer.issuers];
	const attributes = signedAttributes(messageDigest, chain);
	// The digest is over the SET itself (tag 0x31), not over the [0] that stands in the file (RFC 5652, 5.4).
	const toSign = der(new AsnSet({ value: attributes.map((a) => a.toSchema()) }));
	const signature = await signer.sign(toSign);
	const certificate = readCertificate(signer.certificate);
	const digestAlgorithm = () => new AlgorithmIdentifier({ algorithmId: oids.sha256 });
	const signedData = new SignedData({
		version: 1,
		digestAlgorithms: [digestAlgorithm()],
		encapContentInfo: new EncapsulatedContentInfo({ eContentType: oids.data }),
		certificates: sortSet(chain).map((c) => readCertificate(Buffer.from(c))),
		signerInfos: [
			new SignerInfo({
				version: 1,
				sid: new IssuerAndSerialNumber({
					issuer: certificate.issuer,
					serialNumber: certificate.serialNumber
				}),
				digestAlgorithm: digestAlgorithm(),
				signedAttrs: new SignedAndUnsignedAttributes({ type: 0, attributes }),
				signatureAlgorithm: signatureAlgorithms[signer.algorithm](),
				signature: new OctetString({ valueHex: Uint8Array.from(signature).buffer })
			})
		]
	});
	const content = new ContentInfo({ contentType: oids.signedData, content: signedData.toSchema(true) });
	return der(content.toSchema() as Constructed);
}
