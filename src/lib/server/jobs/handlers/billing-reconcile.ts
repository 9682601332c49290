import { reconcile } from '../../billing/reconcile';
import type { JobDefinition } from '../job';

export const billingReconcileJob: JobDefinition<'billing-reconcile'> = {
	async handle(_payload, { db, log }) {
		log.info(await reconcile(db, log), 'compared with the payment service');
	},
	// Nobody waits for it: the next day's job tries again, and the log has the fault.
	abandon: () => Promise.resolve()
};
