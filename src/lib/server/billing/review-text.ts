import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { previewSeats } from './change-seats';
import { reviewPurchase } from './checkout';
import { amountText } from './money';
import { plans } from './plans';
import type { PurchaseInput } from './purchase';
import { counted, dayText } from './sentences';

/* What stands on the pages before a purchase or a change: rows of name and value. */

export interface ReviewText {
	title: string;
	rows: { name: string; value: string }[];
	/** The last row, which counts most. */
	total: { name: string; value: string };
}

/** @throws like `reviewPurchase` */
export async function purchaseText(
	membership: Membership | null,
	input: PurchaseInput,
	db: Database = database()
): Promise<ReviewText> {
	requireAction(membership, 'billing.manage');
	const { purchase, each, total, currency } = await reviewPurchase(membership, input, db);
	const amount = (minor: number) => amountText(minor, currency);
	if (purchase.kind === 'pack') {
		const { exports, months } = plans().pack;
		const all = exports * purchase.quantity;
		return {
			title: `Buy ${counted(all, 'export')}?`,
			rows: [
				{ name: 'Packs', value: `${purchase.quantity} of ${exports} exports, ${amount(each)} each` },
				{ name: 'Valid for', value: `${months} months from today; used after a plan’s monthly ones` },
				{ name: 'Paid', value: 'once' }
			],
			total: { name: 'To pay now', value: amount(total) }
		};
	}
	const { plan, interval, quantity } = purchase;
	const exports = plan.exportsPerSeat * quantity;
	return {
		title: `Take the plan ${plan.name}?`,
		rows: [
			{ name: 'Plan', value: plan.name },
			{ name: 'Seats', value: `${quantity}, ${amount(each)} each a ${interval}` },
			{ name: 'Exports', value: `${exports} a month, pooled by the organisation` },
			{ name: 'Paid', value: `every ${interval}, until it is cancelled; it can be cancelled at any time` }
		],
		total: { name: 'To pay now', value: `${amount(total)}, and the same every ${interval}` }
	};
}

/** @throws like `previewSeats` */
export async function seatsText(
	membership: Membership | null,
	seats: number,
	db: Database = database()
): Promise<ReviewText> {
	const { from, to, interval, now, atOnce, next, nextAt, each, currency } = await previewSeats(
		membership,
		seats,
		db
	);
	const amount = (minor: number) => amountText(minor, currency);
	const described = ({ seats: count, plan }: { seats: number; plan: string }) =>
		`${plan} with ${counted(count, 'seat')}`;
	return {
		title: `Change to ${counted(seats, 'seat')}?`,
		rows: [
			{ name: 'Now', value: described(from) },
			{ name: 'Changed to', value: described(to) },
			{
				name: `This ${interval}`,
				value:
					seats > from.seats
						? `about ${amount(now)} for the rest of it, ${atOnce ? 'charged to the card at once' : 'on the next invoice'}`
						: 'nothing is paid back; the exports of this month stay'
			},
			{ name: 'Next invoice', value: `${amount(next)} on ${dayText(nextAt)}` }
		],
		total: { name: 'From then on', value: `${amount(each)} a ${interval}` }
	};
}
