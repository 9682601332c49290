import type { Call, Routes } from '../core/call';
import { find } from '../core/find';
import { newId, randomText } from '../core/ids';
import type { PortalSession } from '../core/wire';

/** The address is a secret: whoever has it acts for the customer. */
function create({ world, params }: Call): PortalSession {
	const customer = params.required('customer');
	const returnUrl = params.string('return_url') ?? null;
	const locale = params.string('locale') ?? null;
	const configuration = params.string('configuration') ?? 'bpc_standin';
	params.done();
	find(world, 'customers', customer, 'customer');
	const secret = randomText(40);
	const session: PortalSession = {
		id: newId('bps'),
		object: 'billing_portal.session',
		configuration,
		created: world.now(customer),
		customer,
		customer_account: null,
		flow: null,
		livemode: false,
		locale,
		on_behalf_of: null,
		return_url: returnUrl,
		url: `${world.state.base}/portal/${secret}`
	};
	world.objects.portalSessions[session.id] = session;
	world.state.portalSecrets[secret] = session.id;
	world.emit('billing_portal.session.created', session);
	return session;
}

export const portalSessions: Routes = { 'POST /v1/billing_portal/sessions': create };
