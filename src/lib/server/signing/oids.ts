/** Object identifiers of the signature format (RFC 5652, RFC 5035, RFC 5758, RFC 8017). */
export const oids = {
	data: '1.2.840.113549.1.7.1',
	signedData: '1.2.840.113549.1.7.2',
	contentType: '1.2.840.113549.1.9.3',
	messageDigest: '1.2.840.113549.1.9.4',
	signingTime: '1.2.840.113549.1.9.5',
	signingCertificateV2: '1.2.840.113549.1.9.16.2.47',
	signatureTimeStamp: '1.2.840.113549.1.9.16.2.14',
	sha256: '2.16.840.1.101.3.4.2.1',
	sha384: '2.16.840.1.101.3.4.2.2',
	sha512: '2.16.840.1.101.3.4.2.3',
	rsaEncryption: '1.2.840.113549.1.1.1',
	sha256WithRsa: '1.2.840.113549.1.1.11',
	sha384WithRsa: '1.2.840.113549.1.1.12',
	sha512WithRsa: '1.2.840.113549.1.1.13',
	ecdsaWithSha256: '1.2.840.10045.4.3.2',
	ecdsaWithSha384: '1.2.840.10045.4.3.3',
	ecdsaWithSha512: '1.2.840.10045.4.3.4'
} as const;
