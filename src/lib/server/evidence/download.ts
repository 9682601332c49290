import { and, eq, isNull } from 'drizzle-orm';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { dossiers, evidence } from '../db/schema';
import { attachment } from './file-name';

export interface Download {
	content: Buffer;
	headers: Record<string, string>;
}

/**
 * A file with the headers that keep it a download: it holds whatever its sender put in, so it must never run or be
 * drawn as a page of ours.
 * @throws NotFoundError for a foreign, deleted or unknown file, or one whose dossier is deleted.
 */
export async function downloadEvidence(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<Download> {
	requireAction(membership, 'dossier.read');
	const [file] = await db
		.select({
			content: evidence.content,
			fileName: evidence.fileName,
			mediaType: evidence.mediaType
		})
		.from(evidence)
		.innerJoin(dossiers, eq(dossiers.id, evidence.dossierId))
		.where(
			and(
				eq(evidence.id, id),
				eq(evidence.organisationId, membership.organisationId),
				inReach(membership, evidence.dossierId),
				isNull(evidence.deletedAt),
				isNull(dossiers.deletedAt)
			)
		);
	if (file === undefined) throw new NotFoundError('file');
	return {
		content: file.content,
		headers: {
			'content-type': file.mediaType,
			'content-length': String(file.content.length),
			'content-disposition': attachment(file.fileName),
			'content-security-policy': "sandbox; default-src 'none'; frame-ancestors 'none'",
			'x-content-type-options': 'nosniff',
			'cross-origin-resource-policy': 'same-origin',
			'cache-control': 'private, no-store'
		}
	};
}
