import type { Transaction } from '../db';
import { notices } from '../db/schema';
import { enqueue } from '../jobs/queue';

export type NoticeKind = (typeof notices.$inferSelect)['kind'];

export interface NewNotice {
	kind: NoticeKind;
	organisationId: string;
	/** Ids of people; null and doubles are left out. */
	to: readonly (string | null)[];
	/** Who did it themselves and needs no mail about it. */
	except?: string | null;
	/** Ids only: what is written is read when it is sent. */
	subject: { reportId: string; reviewId?: string; issueId?: string };
}

/**
 * Writes a notice for each person and queues its sending, in the transaction of the change that it tells of: rolled
 * back with it. The same kind, subject and person twice is one notice.
 */
export async function writeNotice(tx: Transaction, notice: NewNotice): Promise<void> {
	const { kind, organisationId, subject, except } = notice;
	const about = subject.issueId ?? subject.reviewId ?? subject.reportId;
	const people = new Set(notice.to.filter((id) => id !== null && id !== except));
	for (const userId of people) {
		if (userId === null) continue;
		const [row] = await tx
			.insert(notices)
			.values({ organisationId, kind, key: `${kind}:${about}:${userId}`, userId, subject })
			.onConflictDoNothing({ target: notices.key })
			.returning({ id: notices.id });
		if (row !== undefined) await enqueue(tx, 'send-notice', { noticeId: row.id }, { organisationId });
	}
}
