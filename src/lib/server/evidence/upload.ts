import { createHash } from 'node:crypto';
import { and, eq, isNull, sum } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { InvalidInputError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { evidence, organisations } from '../db/schema';
import { findDossier } from '../dossiers/find';
import { touchDossier } from '../dossiers/touch';
import { checkContent } from './check-content';
import { cleanFileName } from './file-name';
import { organisationQuota } from './limits';

/*
 * Evidence keeps its bytes: its hash stands in records and reports, so nothing is re-encoded and no metadata is taken
 * out. That is why a file is never shown within the application's origin, as a picture or otherwise, but only handed
 * back as a download (./download.ts).
 */

/** A folder of data sheets at a time, but no flood: each file is parsed, hashed and stored. */
const paceOfPerson = { max: 60, seconds: 600 };
const paceOfOrganisation = { max: 240, seconds: 600 };

export interface GivenFile {
	/** As the browser calls it. */
	name: string;
	bytes: Buffer;
}

function refuse(message: string): never {
	throw new InvalidInputError(message, { file: message });
}

/**
 * Adds a file to a dossier.
 * @returns its id and the SHA-256 of its bytes, in hex.
 * @throws InvalidInputError, with the fault at the field `file`, for a file that is not taken; TooManyRequestsError.
 */
export async function uploadEvidence(
	membership: Membership | null,
	dossierId: string,
	file: GivenFile,
	db: Database = database()
): Promise<{ id: string; sha256: string }> {
	requireAction(membership, 'evidence.write');
	await limit(`evidence:${membership.userId}`, paceOfPerson.max, paceOfPerson.seconds, db);
	await limit(
		`evidence-of:${membership.organisationId}`,
		paceOfOrganisation.max,
		paceOfOrganisation.seconds,
		db
	);
	await findDossier(db, membership, dossierId);
	const mediaType = checkContent(file.bytes);
	const sha256 = createHash('sha256').update(file.bytes).digest('hex');
	const fileName = cleanFileName(file.name, mediaType);
	return db.transaction(async (tx) => {
		// One upload of an organisation at a time, or two at once could both see room for one.
		await tx
			.select({ id: organisations.id })
			.from(organisations)
			.where(eq(organisations.id, membership.organisationId))
			.for('no key update');
		await findDossier(tx, membership, dossierId);
		const [used] = await tx
			.select({ bytes: sum(evidence.size).mapWith(Number) })
			.from(evidence)
			.where(eq(evidence.organisationId, membership.organisationId));
		if ((used?.bytes ?? 0) + file.bytes.length > organisationQuota) {
			refuse(
				'Your organisation’s files fill the 500 MB that it has. Delete files that no calculation uses; their room comes back after thirty days.'
			);
		}
		const [twin] = await tx
			.select({ fileName: evidence.fileName })
			.from(evidence)
			.where(
				and(
					eq(evidence.organisationId, membership.organisationId),
					eq(evidence.dossierId, dossierId),
					eq(evidence.sha256, sha256),
					isNull(evidence.deletedAt)
				)
			);
		if (twin !== undefined) refuse(`This file is in the dossier already, as “${twin.fileName}”.`);
		const [made] = await tx
			.insert(evidence)
			.values({
				organisationId: membership.organisationId,
				dossierId,
				fileName,
				mediaType,
				size: file.bytes.length,
				sha256,
				content: file.bytes,
				uploadedBy: membership.userId
			})
			.returning({ id: evidence.id });
		if (made === undefined) throw new Error('The database returned no row for a new file.');
		await touchDossier(tx, membership, dossierId);
		await recordAudit(tx, membership, 'evidence.upload', made.id, {
			dossier: dossierId,
			sha256,
			size: file.bytes.length
		});
		return { id: made.id, sha256 };
	});
}
