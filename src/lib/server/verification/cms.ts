import { createHash, verify, X509Certificate, type KeyObject } from 'node:crypto';
import { ObjectIdentifier, OctetString, Sequence, Set as AsnSet } from 'asn1js';
import {
	Certificate,
	ContentInfo,
	IssuerAndSerialNumber,
	SignedData,
	type Attribute,
	type SignerInfo
} from 'pkijs';
import { sortSet } from '../signing/cms';
import { oids } from '../signing/oids';

/** What the CMS of a report holds, with everything that is wrong about it. */
export interface CmsFinding {
	signer: X509Certificate | undefined;
	/** The certificates between signer and root, nearest first. */
	issuers: X509Certificate[];
	/** True where the content's digest is the signed one. */
	digestMatches: boolean;
	faults: string[];
}

const der = (block: { toBER(): ArrayBuffer }): Buffer => Buffer.from(block.toBER());
const sha256 = (bytes: Uint8Array): Buffer => createHash('sha256').update(bytes).digest();
const octets = (block: OctetString): Buffer => Buffer.from(block.valueBlock.valueHexView);

const unreadable = 'The signature itself is damaged or is not written the way this service writes it.';

/** Signature algorithms of reports, all with SHA-256, by the kind of key that they need. */
const algorithms: Readonly<Record<string, string>> = {
	[oids.ecdsaWithSha256]: 'ec',
	[oids.sha256WithRsa]: 'rsa'
};

/** P-256 or better, RSA from 2048 bits. */
export function isStrongKey(key: KeyObject): boolean {
	const details = key.asymmetricKeyDetails;
	if (key.asymmetricKeyType === 'rsa') return (details?.modulusLength ?? 0) >= 2048;
	const curves = ['prime256v1', 'secp384r1', 'secp521r1'];
	return key.asymmetricKeyType === 'ec' && curves.includes(details?.namedCurve ?? '');
}

/**
 * Parses and encodes again: only the one DER form of the same content passes, so that nothing in the unsigned frame
 * can be varied or hidden.
 */
function parse(cms: Buffer): { data: SignedData; info: SignerInfo } | undefined {
	try {
		const outer = ContentInfo.fromBER(Uint8Array.from(cms).buffer);
		const data = new SignedData({ schema: outer.content });
		const again = new ContentInfo({ contentType: oids.signedData, content: data.toSchema(false) });
		const [info] = data.signerInfos;
		if (!der(again.toSchema()).equals(cms) || data.signerInfos.length !== 1 || !info) return undefined;
		return { data, info };
	} catch {
		return undefined;
	}
}

/** The signed attributes' values by type; undefined unless they are exactly the three of PAdES B-B, once each. */
function readAttributes(attributes: readonly Attribute[]): Map<string, unknown> | undefined {
	const values = new Map<string, unknown>();
	for (const { type, values: own } of attributes) {
		if (values.has(type) || own.length !== 1) return undefined;
		values.set(type, (own as unknown[])[0]);
	}
	const wanted = [oids.contentType, oids.messageDigest, oids.signingCertificateV2];
	return values.size === wanted.length && wanted.every((type) => values.has(type)) ? values : undefined;
}

/** Hashes in signing-certificate-v2 (RFC 5035), signer first; undefined unless all are plain SHA-256. */
function certificateHashes(value: unknown): Buffer[] | undefined {
	const list = value instanceof Sequence ? value.valueBlock.value : [];
	const [ids] = list;
	if (list.length !== 1 || !(ids instanceof Sequence)) return undefined;
	const hashes: Buffer[] = [];
	for (const id of ids.valueBlock.value) {
		const parts = id instanceof Sequence ? id.valueBlock.value : [];
		const [hash] = parts;
		// Only the hash: the algorithm is the default, SHA-256, and DER leaves a default out.
		if (parts.length !== 1 || !(hash instanceof OctetString)) return undefined;
		hashes.push(octets(hash));
	}
	return hashes.length > 0 ? hashes : undefined;
}

/** The file's certificates in the order of the signed hashes; undefined unless both lists hold the same ones. */
function orderCertificates(certificates: readonly Buffer[], hashes: readonly Buffer[]): Buffer[] | undefined {
	if (certificates.length !== hashes.length) return undefined;
	const ordered = hashes.map((hash) => certificates.find((c) => sha256(c).equals(hash)));
	return ordered.every((c) => c !== undefined) && new Set(ordered).size === ordered.length
		? ordered
		: undefined;
}

const plainAlgorithms = (data: SignedData, info: SignerInfo): boolean =>
	data.digestAlgorithms.length === 1 &&
	data.digestAlgorithms[0]?.algorithmId === oids.sha256 &&
	info.digestAlgorithm.algorithmId === oids.sha256 &&
	info.signatureAlgorithm.algorithmId in algorithms;

const plainFrame = (data: SignedData, info: SignerInfo): boolean =>
	data.version === 1 &&
	info.version === 1 &&
	data.encapContentInfo.eContentType === oids.data &&
	data.encapContentInfo.eContent === undefined &&
	(data.crls?.length ?? 0) === 0 &&
	info.unsignedAttrs === undefined;

/** By bytes: the library's own comparison of names overlooks capitals, and so would let them be changed. */
function namesSigner(info: SignerInfo, signer: Certificate): boolean {
	return (
		info.sid instanceof IssuerAndSerialNumber &&
		der(info.sid.issuer.toSchema()).equals(der(signer.issuer.toSchema())) &&
		der(info.sid.serialNumber).equals(der(signer.serialNumber))
	);
}

function verifySignature(info: SignerInfo, signer: X509Certificate): boolean {
	const encoded = (info.signedAttrs?.attributes ?? []).map((a) => der(a.toSchema()));
	const inOrder = sortSet(encoded).every((member, i) => encoded[i]?.equals(member) === true);
	// Signed is the SET itself (tag 0x31), not the [0] that stands in the file (RFC 5652, 5.4).
	const signed = der(new AsnSet({ value: (info.signedAttrs?.attributes ?? []).map((a) => a.toSchema()) }));
	const key = signer.publicKey;
	if (!inOrder || !isStrongKey(key)) return false;
	if (algorithms[info.signatureAlgorithm.algorithmId] !== key.asymmetricKeyType) return false;
	return verify('sha256', signed, key, octets(info.signature));
}

/**
 * Checks the CMS of a report against the digest of the signed bytes: form, attributes, certificates, signature
 * value. The chain to a root is not looked at here.
 */
export function checkCms(cms: Buffer, digest: Buffer | undefined): CmsFinding {
	const finding: CmsFinding = { signer: undefined, issuers: [], digestMatches: false, faults: [] };
	const parsed = parse(cms);
	if (parsed === undefined) return { ...finding, faults: [unreadable] };
	const { data, info } = parsed;
	const { faults } = finding;
	if (!plainAlgorithms(data, info)) faults.push('The signature uses an algorithm that reports do not use.');
	if (!plainFrame(data, info)) faults.push('The signature carries parts that reports do not carry.');

	const values = readAttributes(info.signedAttrs?.attributes ?? []);
	if (values === undefined) return { ...finding, faults: [...faults, unreadable] };
	const type = values.get(oids.contentType);
	if (!(type instanceof ObjectIdentifier) || type.valueBlock.toString() !== oids.data) {
		faults.push('The signature is over something else than a file.');
	}
	const messageDigest = values.get(oids.messageDigest);
	finding.digestMatches =
		digest !== undefined && messageDigest instanceof OctetString && octets(messageDigest).equals(digest);

	const certificates = (data.certificates ?? []).filter((c): c is Certificate => c instanceof Certificate);
	const hashes = certificateHashes(values.get(oids.signingCertificateV2));
	const encoded = certificates.map((c) => der(c.toSchema(false)));
	const ordered = hashes && orderCertificates(encoded, hashes);
	const [signerDer, ...issuers] = ordered ?? [];
	if (signerDer === undefined || certificates.length !== data.certificates?.length) {
		return {
			...finding,
			faults: [...faults, 'A certificate in the file is not the one that was signed with.']
		};
	}
	try {
		finding.signer = new X509Certificate(signerDer);
		finding.issuers = issuers.map((issuer) => new X509Certificate(issuer));
		const own = Certificate.fromBER(Uint8Array.from(signerDer).buffer);
		if (!namesSigner(info, own)) faults.push('The signature names another certificate than the one it uses.');
		if (!verifySignature(info, finding.signer)) faults.push('The signature value does not hold.');
	} catch {
		faults.push(unreadable);
	}
	return finding;
}
