import { randomUUID, X509Certificate } from 'node:crypto';
import { and, desc, eq, gt, isNull, sql } from 'drizzle-orm';
import { NotFoundError } from '../access/errors';
import type { Database, Queryable, Transaction } from '../db';
import { certificates, organisations } from '../db/schema';
import { issueCertificate, localSigner, type CertificateKind, type Issued } from './certificates';
import type { Signer } from './cms';
import { sealer } from './sealing';

type Row = typeof certificates.$inferSelect;

/** A certificate of the service, without its key. */
export interface StoredCertificate {
	id: string;
	pem: string;
	/** SHA-256 of the DER, lower-case hexadecimal. */
	fingerprint: string;
	notAfter: Date;
}

/** Days before its end at which a certificate is no longer used to sign; an issuing one must outlast five years. */
const spareDays: Record<CertificateKind, number> = { root: 0, issuing: 5 * 366, organisation: 30 };

const purposeOf = (id: string): string => `certificate ${id}`;

const derOf = (pem: string): Buffer => new X509Certificate(pem).raw;

const stored = (row: Row): StoredCertificate => ({
	id: row.id,
	pem: row.certificatePem,
	fingerprint: row.fingerprint,
	notAfter: row.notAfter
});

const open = (row: Row): Pick<Issued, 'der' | 'privateKey'> => ({
	der: derOf(row.certificatePem),
	privateKey: sealer().open(row.sealedKey, purposeOf(row.id))
});

/** The newest certificate of its kind that may still sign. */
async function current(
	q: Queryable,
	kind: CertificateKind,
	organisationId?: string
): Promise<Row | undefined> {
	const until = sql`now() + make_interval(days => ${spareDays[kind]})`;
	const [row] = await q
		.select()
		.from(certificates)
		.where(
			and(
				eq(certificates.kind, kind),
				organisationId === undefined
					? isNull(certificates.organisationId)
					: eq(certificates.organisationId, organisationId),
				isNull(certificates.revokedAt),
				gt(certificates.notAfter, until)
			)
		)
		.orderBy(desc(certificates.createdAt), desc(certificates.id))
		.limit(1);
	return row;
}

async function store(
	tx: Transaction,
	kind: CertificateKind,
	issued: Issued,
	organisationId?: string
): Promise<Row> {
	const id = randomUUID();
	const [row] = await tx
		.insert(certificates)
		.values({
			id,
			organisationId: organisationId ?? null,
			kind,
			subject: issued.subject,
			serial: issued.serial,
			certificatePem: issued.pem,
			sealedKey: sealer().seal(issued.privateKey, purposeOf(id)),
			fingerprint: issued.fingerprint,
			notBefore: issued.notBefore,
			notAfter: issued.notAfter
		})
		.returning();
	return row as Row;
}

/**
 * Runs `make` unless `find` finds something; two callers at once get the one that the first made. The lock ends with
 * the transaction.
 */
async function once(
	db: Queryable,
	lock: string,
	find: (q: Queryable) => Promise<Row | undefined>,
	make: (tx: Transaction) => Promise<Row>
): Promise<Row> {
	const found = await find(db);
	if (found) return found;
	return db.transaction(async (tx) => {
		await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${lock}, 0))`);
		return (await find(tx)) ?? (await make(tx));
	});
}

const serviceName = (commonName: string) => ({ commonName, organisation: 'Noonmark' });

const ensureRoot = (db: Queryable): Promise<Row> =>
	once(
		db,
		'noonmark: root certificate',
		(q) => current(q, 'root'),
		async (tx) => store(tx, 'root', await issueCertificate('root', serviceName('Noonmark Root'), new Date()))
	);

const ensureIssuing = (db: Queryable, root: Row): Promise<Row> =>
	once(
		db,
		'noonmark: issuing certificate',
		(q) => current(q, 'issuing'),
		async (tx) => {
			const names = serviceName('Noonmark Issuing');
			return store(tx, 'issuing', await issueCertificate('issuing', names, new Date(), open(root)));
		}
	);

/** Makes the service's root and issuing certificate where they are missing; safe to call from any process at once. */
export async function ensureAuthority(
	db: Queryable
): Promise<{ root: StoredCertificate; issuing: StoredCertificate }> {
	const root = await ensureRoot(db);
	return { root: stored(root), issuing: stored(await ensureIssuing(db, root)) };
}

async function ensureOrganisation(db: Queryable, organisationId: string): Promise<Row> {
	const issuing = await ensureIssuing(db, await ensureRoot(db));
	return once(
		db,
		`noonmark: certificate of ${organisationId}`,
		(q) => current(q, 'organisation', organisationId),
		async (tx) => {
			const [organisation] = await tx
				.select({ name: organisations.name })
				.from(organisations)
				.where(eq(organisations.id, organisationId));
			if (organisation === undefined) throw new NotFoundError('organisation');
			const names = { commonName: organisation.name, organisation: organisation.name };
			const issued = await issueCertificate('organisation', names, new Date(), open(issuing));
			return store(tx, 'organisation', issued, organisationId);
		}
	);
}

/** The organisation's signing certificate in its present name, made at first use. */
export async function ensureOrganisationCertificate(
	db: Queryable,
	organisationId: string
): Promise<StoredCertificate> {
	return stored(await ensureOrganisation(db, organisationId));
}

/** The certificate that issued another, by name and signature. */
async function issuerOf(db: Queryable, certificate: X509Certificate): Promise<Row> {
	const rows = await db.select().from(certificates).where(eq(certificates.kind, 'issuing'));
	const found = rows.find((row) => {
		const candidate = new X509Certificate(row.certificatePem);
		return certificate.checkIssued(candidate) && certificate.verify(candidate.publicKey);
	});
	if (found === undefined) throw new Error('The issuer of the signing certificate is missing.');
	return found;
}

/**
 * What signs an organisation's reports, with the id of the certificate to be recorded with the issue. The private
 * key is in memory as long as the signer is.
 */
export async function organisationSigner(
	db: Queryable,
	organisationId: string
): Promise<{ certificateId: string; signer: Signer }> {
	const row = await ensureOrganisation(db, organisationId);
	const { der, privateKey } = open(row);
	const issuer = await issuerOf(db, new X509Certificate(der));
	return {
		certificateId: row.id,
		signer: localSigner(der, privateKey, [derOf(issuer.certificatePem)])
	};
}

/** The service's root certificate as PEM, to be published; made if it is missing. */
export async function rootPem(db: Database): Promise<string> {
	return (await ensureRoot(db)).certificatePem;
}
