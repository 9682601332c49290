import { and, eq, isNull, sql } from 'drizzle-orm';
import { notices } from '../../db/schema';
import { sendMail, type Mail } from '../../mail/transport';
import { composeNotice } from '../../notices/compose';
import type { JobDefinition } from '../job';

/**
 * Sends one notice. Its unique key makes it one row and one job however often the change is asked for, and `sentAt`
 * keeps a later delivery of the job from sending again. What remains: a worker that dies between the mail server's
 * acceptance and the commit of `sentAt` leaves the next attempt to send it once more. Both copies bear the same
 * Message-ID, by which mail programs can tell that they are one.
 */
export function sendNoticeJob(send: (mail: Mail) => Promise<void> = sendMail): JobDefinition<'send-notice'> {
	return {
		async handle({ noticeId }, context) {
			const [notice] = await context.db.select().from(notices).where(eq(notices.id, noticeId));
			if (notice === undefined || notice.sentAt !== null) return;
			const composed = await composeNotice(notice, context.db);
			if ('problem' in composed) {
				context.log.info({ notice: noticeId, kind: notice.kind }, 'notice not sent: %s', composed.problem);
				await context.finish(async (tx) => {
					await tx.update(notices).set({ problem: composed.problem }).where(eq(notices.id, noticeId));
				});
				return;
			}
			await send({ ...composed.mail, id: noticeId });
			await context.finish(async (tx) => {
				await tx
					.update(notices)
					.set({ sentAt: sql`now()`, problem: null })
					.where(eq(notices.id, noticeId));
			});
		},
		async abandon({ noticeId }, _problem, tx) {
			await tx
				.update(notices)
				.set({ problem: 'The mail server did not take it in many attempts.' })
				.where(and(eq(notices.id, noticeId), isNull(notices.sentAt)));
		}
	};
}
