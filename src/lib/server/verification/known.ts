import { and, desc, eq, gt, type SQL } from 'drizzle-orm';
import { NotFoundError } from '../access/errors';
import { database, type Queryable } from '../db';
import { certificates, issues, organisations, reports } from '../db/schema';
import { normaliseCode } from './code';

/**
 * What the ledger of issued reports says to anybody: which report it is and how it stands. Nothing of its content,
 * its title or its addressee.
 */
export interface KnownReport {
	number: string;
	revision: number;
	code: string;
	organisation: string;
	state: 'issued' | 'superseded' | 'withdrawn';
	issuedAt: Date;
	/** SHA-256 of the issued file, lower-case hexadecimal. */
	sha256: string;
	/** The newest revision after this one, where there is one. */
	replacedBy: { revision: number; code: string; issuedAt: Date } | null;
	/** When the certificate that it was signed with was revoked. */
	certificateRevokedAt: Date | null;
}

async function find(q: Queryable, which: SQL): Promise<KnownReport | undefined> {
	const [row] = await q
		.select({
			number: reports.number,
			revision: issues.revision,
			code: issues.code,
			organisation: organisations.name,
			organisationId: issues.organisationId,
			state: reports.state,
			issuedAt: issues.issuedAt,
			sha256: issues.sha256,
			certificateRevokedAt: certificates.revokedAt
		})
		.from(issues)
		.innerJoin(reports, eq(reports.id, issues.reportId))
		.innerJoin(organisations, eq(organisations.id, issues.organisationId))
		.leftJoin(certificates, eq(certificates.id, issues.certificateId))
		.where(and(eq(issues.state, 'done'), which))
		.limit(1);
	if (row?.issuedAt == null || row.sha256 === null) return undefined;
	const { organisationId, state, issuedAt, sha256, ...rest } = row;
	const replacedBy = await findNewer(q, organisationId, row.number, row.revision);
	return {
		...rest,
		issuedAt,
		sha256,
		replacedBy,
		state:
			state === 'withdrawn' ? 'withdrawn' : replacedBy || state === 'superseded' ? 'superseded' : 'issued'
	};
}

/** The newest issued revision of the same number. */
async function findNewer(
	q: Queryable,
	organisationId: string,
	number: string,
	revision: number
): Promise<KnownReport['replacedBy']> {
	const [newer] = await q
		.select({ revision: issues.revision, code: issues.code, issuedAt: issues.issuedAt })
		.from(issues)
		.innerJoin(reports, eq(reports.id, issues.reportId))
		.where(
			and(
				eq(reports.organisationId, organisationId),
				eq(reports.number, number),
				eq(issues.state, 'done'),
				gt(issues.revision, revision)
			)
		)
		.orderBy(desc(issues.revision))
		.limit(1);
	return newer?.issuedAt ? { ...newer, issuedAt: newer.issuedAt } : null;
}

/** The report whose issued file has exactly this SHA-256. */
export function findKnownFile(sha256: string, q: Queryable = database()): Promise<KnownReport | undefined> {
	return find(q, eq(issues.sha256, sha256));
}

/**
 * The report that a code stands for, however it was typed.
 * @throws NotFoundError where no issued report has it.
 */
export async function findByCode(typed: string, q: Queryable = database()): Promise<KnownReport> {
	const code = normaliseCode(typed);
	const found = code && (await find(q, eq(issues.code, code)));
	if (!found) throw new NotFoundError('code');
	return found;
}
