import { desc, eq } from 'drizzle-orm';
import { can, requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { invoices } from '../db/schema';
import { customerOf } from './customers';
import { terminalStatuses } from './entitlement';
import { exportsLeft } from './ledger';
import { amountText } from './money';
import { plans, seatBounds } from './plans';
import { seatsOf } from './seats';
import { planNotices, planText, sourceText, usesOneText, type Notice } from './sentences';

export interface BillingOverview {
	plan: string;
	notices: Notice[];
	/** A subscription that is not over: its seats can be changed, and no second one bought. */
	isSubscribed: boolean;
	/** It runs on: seats of a cancelled one stay as they are. */
	seatsChangeable: boolean;
	/** There is something to manage in the customer portal. */
	hasCustomer: boolean;
	seats: { taken: number; limit: number };
	exports: {
		left: number;
		waiting: number;
		blocked: boolean;
		sources: { kind: 'trial' | 'month' | 'pack'; left: number; of: number; ends: string }[];
	};
	invoices: {
		id: string;
		number: string | null;
		madeAt: Date;
		total: string;
		open: string | null;
		status: string;
		href: string | null;
	}[];
	offer: {
		plans: {
			name: string;
			seats: string;
			exportsPerSeat: number;
			singleSignOn: boolean;
			month: string;
			year: string;
		}[];
		pack: { exports: number; months: number; price: string; most: number };
	};
}

async function invoiceRows(organisationId: string, db: Queryable): Promise<BillingOverview['invoices']> {
	const rows = await db
		.select()
		.from(invoices)
		.where(eq(invoices.organisationId, organisationId))
		.orderBy(desc(invoices.madeAt), desc(invoices.number))
		.limit(60);
	return rows
		.filter(({ status }) => status !== 'draft')
		.map(({ id, number, madeAt, total, amountDue, currency, status, hostedUrl, pdfUrl }) => ({
			id,
			number,
			madeAt,
			total: amountText(total, currency),
			open: status === 'open' && amountDue > 0 ? amountText(amountDue, currency) : null,
			status,
			href: hostedUrl ?? pdfUrl
		}));
}

/** Everything on the billing page, from our own copies: it is there also while the payment service is away. */
export async function billingOverview(
	membership: Membership | null,
	db: Queryable = database()
): Promise<BillingOverview> {
	requireAction(membership, 'billing.manage');
	const { organisationId } = membership;
	const { subscription, access, left, waiting, blocked, sources } = await exportsLeft(organisationId, db);
	const seats = await seatsOf(organisationId, db);
	const { currency, plans: offered, pack } = plans();
	const isEnding = subscription?.cancelAtPeriodEnd ?? false;
	const isSubscribed = subscription !== undefined && !terminalStatuses.has(subscription.status);
	return {
		plan: planText(subscription, access),
		notices: planNotices(subscription, access, seats),
		isSubscribed,
		seatsChangeable: isSubscribed && !isEnding,
		hasCustomer: (await customerOf(organisationId, db)) !== null,
		seats,
		exports: {
			left,
			waiting,
			blocked,
			sources: sources.map((source) => ({
				kind: source.kind,
				left: source.left,
				of: source.of,
				ends: sourceText(
					source,
					isEnding && source.until !== null && source.until >= (subscription?.periodEnd ?? source.until)
				)
			}))
		},
		invoices: await invoiceRows(organisationId, db),
		offer: {
			plans: offered.map((plan) => ({
				name: plan.name,
				seats: seatBounds(plan),
				exportsPerSeat: plan.exportsPerSeat,
				singleSignOn: plan.singleSignOn,
				month: amountText(plan.seatPrice.month, currency),
				year: amountText(plan.seatPrice.year, currency)
			})),
			pack: { ...pack, price: amountText(pack.price, currency) }
		}
	};
}

export interface ExportsForIssue {
	/** Beyond those that reports under way will take. */
	free: number;
	/** "Issuing uses one export; 7 are left." */
	sentence: string;
	/** May issue now, as far as exports go. */
	mayIssue: boolean;
	/** The way to get more, where there is need: a page for whoever may buy, otherwise whom to ask. */
	more: { text: string; href: string | null } | null;
}

/** For the pages on which an export is about to be used. */
export async function exportsSentence(
	membership: Membership | null,
	db: Queryable = database()
): Promise<ExportsForIssue> {
	requireAction(membership, 'report.read');
	const found = await exportsLeft(membership.organisationId, db);
	const free = found.blocked ? 0 : Math.max(0, found.left - found.waiting);
	const { exports } = plans().pack;
	const mayBuy = can(membership, 'billing.manage');
	const what = found.blocked ? 'pay the open invoice' : `choose a plan or buy ${exports} exports`;
	return {
		free,
		sentence: usesOneText(found),
		mayIssue: free > 0,
		more:
			free > 0
				? null
				: mayBuy
					? { text: `On the billing page you can ${what}.`, href: '/billing' }
					: { text: `An owner or the billing contact can ${what}.`, href: null }
	};
}
