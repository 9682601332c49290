import { dossierInput, type DossierInput } from '$lib/schemas/dossier';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { dossiers } from '../db/schema';

/** Opens a dossier. @returns its id. */
export async function createDossier(
	membership: Membership | null,
	input: DossierInput,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'dossier.write');
	// Parsed once more, so that no caller can write a column that the form does not have.
	const fields = dossierInput.parse(input);
	return db.transaction(async (tx) => {
		const [made] = await tx
			.insert(dossiers)
			.values({ ...fields, organisationId: membership.organisationId, createdBy: membership.userId })
			.returning({ id: dossiers.id });
		if (made === undefined) throw new Error('The database returned no row for a new dossier.');
		await recordAudit(tx, membership, 'dossier.create', made.id);
		return made.id;
	});
}
