import type { Access } from './entitlement';
import type { ExportSource, ExportsLeft } from './ledger';
import { amountText } from './money';
import { planById, plans, type Plans } from './plans';
import type { Seats } from './seats';
import type { Subscription } from './standing';

/* How an organisation stands, in sentences. */

const format = new Intl.DateTimeFormat('en-GB', {
	day: 'numeric',
	month: 'long',
	year: 'numeric',
	timeZone: 'UTC'
});

export const dayText = (at: Date): string => format.format(at);

export const counted = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`;

/** A state of the plan as a sentence with its weight. */
export interface Notice {
	level: 'note' | 'caution' | 'stop';
	lead: string;
	text: string;
}

const keeps = 'Reports that were issued stay readable and can be verified.';

/** What the plan is, in one or two sentences. */
export function planText(
	subscription: Subscription | undefined,
	access: Access | undefined,
	all: Plans = plans()
): string {
	const { trial } = all;
	const without = `Without a plan ${counted(trial.seats, 'member')} can work here, with ${counted(trial.exports, 'export')} to try, once.`;
	if (subscription === undefined || access === undefined) return `There is no plan. ${without}`;
	if (access.standing === 'over' || access.standing === 'run-out') {
		const end = subscription.endedAt ?? subscription.periodEnd;
		return `The plan ended on ${dayText(end)}. ${without} Packs that were bought go on until they run out.`;
	}
	const plan = planById(subscription.planId, all);
	if (plan === undefined || subscription.interval === null)
		return 'The plan is not one that is offered here.';
	const { interval, quantity } = subscription;
	const price = amountText(plan.seatPrice[interval] * quantity, all.currency);
	return `${plan.name} with ${counted(quantity, 'seat')}, ${price} a ${interval} by today’s prices. The running ${interval} ends on ${dayText(subscription.periodEnd)}.`;
}

/** What is out of the ordinary, gravest first. */
export function planNotices(
	subscription: Subscription | undefined,
	access: Access | undefined,
	seats: Seats
): Notice[] {
	const notices: Notice[] = [];
	if (subscription !== undefined && access !== undefined) {
		const { standing, until } = access;
		if (standing === 'owing') {
			notices.push({
				level: 'stop',
				lead: 'An invoice is not paid, and new exports have stopped.',
				text: `They go on as soon as it is paid. ${keeps}`
			});
		}
		if (standing === 'grace' && until !== null) {
			notices.push({
				level: 'caution',
				lead: `An invoice is not paid: new exports stop on ${dayText(until)}.`,
				text: `Until then everything goes on. ${keeps}`
			});
		}
		if (standing === 'unknown') {
			notices.push({
				level: 'stop',
				lead: 'The payment service gives a state that is not known here, and new exports have stopped.',
				text: `Look into it in the customer portal, or write to us. ${keeps}`
			});
		}
		if (standing === 'resting') {
			notices.push({
				level: 'caution',
				lead: 'The plan rests: its exports and seats do not count at present.',
				text: `${keeps} Packs that were bought can be used.`
			});
		}
		if (subscription.cancelAtPeriodEnd && access.allowance) {
			notices.push({
				level: 'caution',
				lead: `The plan is cancelled and ends on ${dayText(subscription.periodEnd)}.`,
				text: `Until then nothing changes, and the cancellation can be taken back in the customer portal. ${keeps}`
			});
		}
	}
	if (seats.taken > seats.limit) {
		notices.push({
			level: 'caution',
			lead: `${counted(seats.taken, 'member')} for ${counted(seats.limit, 'seat')}.`,
			text: 'Nobody is put out, but nobody can be taken in before there are seats enough.'
		});
	}
	return notices;
}

/** Where exports come from and what becomes of them. */
export function sourceText({ kind, until }: ExportSource, isEnding: boolean): string {
	if (kind === 'trial') return 'do not run out';
	if (until === null) return 'do not run out';
	if (kind === 'pack') return `run out on ${dayText(until)}`;
	return isEnding ? `run out on ${dayText(until)}` : `are renewed on ${dayText(until)}`;
}

/** The sentence that stands wherever an export is about to be used. */
export function usesOneText({ left, waiting, blocked }: ExportsLeft): string {
	if (blocked)
		return 'Issuing uses one export, and new exports have stopped until the plan’s invoice is paid.';
	const free = Math.max(0, left - waiting);
	if (left === 0) return 'Issuing uses one export, and none is left.';
	const held = waiting === 0 ? '' : `, ${waiting} of them for reports that are being issued at this moment`;
	if (free === 0) return `Issuing uses one export, and ${counted(left, 'is', 'are')} left${held}.`;
	return `Issuing uses one export; ${counted(left, 'is', 'are')} left${held}.`;
}
