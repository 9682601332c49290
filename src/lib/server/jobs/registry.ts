import { billingEventJob } from './handlers/billing-event';
import { billingReconcileJob } from './handlers/billing-reconcile';
import { computeRunJob, type ComputeBeside } from './handlers/compute-run';
import { issueReportJob, type ReportIssuing } from './handlers/issue-report';
import { purgeDeletedJob } from './handlers/purge-deleted';
import { renderPreviewJob, type PreviewRendering } from './handlers/render-preview';
import { sendNoticeJob } from './handlers/send-notice';
import type { JobDefinitions } from './job';

/** What the jobs need from the process that runs them. */
export interface JobParts {
	compute: ComputeBeside;
	issuing: ReportIssuing;
	preview: PreviewRendering;
}

/** The definition of every job. */
export function jobDefinitions({ compute, issuing, preview }: JobParts): JobDefinitions {
	return {
		'compute-run': computeRunJob(compute),
		'issue-report': issueReportJob(issuing),
		'render-preview': renderPreviewJob(preview),
		'purge-deleted': purgeDeletedJob,
		'send-notice': sendNoticeJob(),
		'billing-event': billingEventJob,
		'billing-reconcile': billingReconcileJob
	};
}
