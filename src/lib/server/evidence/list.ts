import { and, desc, eq, isNull } from 'drizzle-orm';
import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { evidence, users } from '../db/schema';
import type { EvidenceMediaType } from './check-content';

export interface EvidenceRow {
	id: string;
	fileName: string;
	mediaType: EvidenceMediaType;
	size: number;
	sha256: string;
	uploadedAt: Date;
	/** Null where that account is gone. */
	uploadedBy: string | null;
}

/** The files of a dossier, latest first, without their content. */
export async function listEvidence(
	membership: Membership | null,
	dossierId: string,
	db: Queryable = database()
): Promise<EvidenceRow[]> {
	requireAction(membership, 'dossier.read');
	return db
		.select({
			id: evidence.id,
			fileName: evidence.fileName,
			mediaType: evidence.mediaType,
			size: evidence.size,
			sha256: evidence.sha256,
			uploadedAt: evidence.uploadedAt,
			uploadedBy: users.name
		})
		.from(evidence)
		.leftJoin(users, eq(users.id, evidence.uploadedBy))
		.where(
			and(
				eq(evidence.organisationId, membership.organisationId),
				inReach(membership, evidence.dossierId),
				eq(evidence.dossierId, dossierId),
				isNull(evidence.deletedAt)
			)
		)
		.orderBy(desc(evidence.uploadedAt), evidence.id);
}
