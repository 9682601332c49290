import { and, eq, ne } from 'drizzle-orm';
import type { ReportModel } from '../../../report';
import { previews } from '../../db/schema';
import type { JobDefinition } from '../job';

/** Renders a draft with its watermark and without a signature. */
export type PreviewRendering = (model: ReportModel) => Promise<Uint8Array>;

/** Renders one preview. One that is over, or gone with its report, is left alone. */
export function renderPreviewJob(render: PreviewRendering): JobDefinition<'render-preview'> {
	return {
		async handle({ previewId }, context) {
			const [preview] = await context.db
				.select({ model: previews.model, state: previews.state })
				.from(previews)
				.where(eq(previews.id, previewId));
			if (preview === undefined || preview.state === 'done' || preview.state === 'failed') return;
			await context.guarded(async (tx) => {
				await tx.update(previews).set({ state: 'rendering' }).where(eq(previews.id, previewId));
			});
			const pdf = Buffer.from(await render(preview.model as ReportModel));
			await context.finish(async (tx) => {
				await tx.update(previews).set({ state: 'done', pdf }).where(eq(previews.id, previewId));
			});
		},
		async abandon({ previewId }, problem, tx) {
			await tx
				.update(previews)
				.set({ state: 'failed', problem })
				.where(and(eq(previews.id, previewId), ne(previews.state, 'done')));
		}
	};
}
