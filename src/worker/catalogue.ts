import { ensureCatalogue } from '../lib/server/billing/catalogue';
import { plans } from '../lib/server/billing/plans';
import { stripe } from '../lib/server/billing/stripe';
import { log } from '../lib/server/log';

/* Makes the plans' products and prices at the payment service, where they are missing. */
try {
	const made = await ensureCatalogue(stripe(), plans());
	log.info({ made }, made.length === 0 ? 'every price is there' : 'prices were made');
} catch (error) {
	log.fatal({ err: error }, 'the prices could not be made');
	process.exitCode = 1;
}
