import { newId } from './ids';
import { apiVersion } from './version';
import type { State } from './state';
import type { Event, EventSubject, EventType } from './wire';

/** What happens to an invoice that cannot be collected, as set in the account. */
export type Dunning = {
	/** Days between one attempt and the next. */
	retryDays: number[];
	/** What becomes of the subscription after the last attempt. */
	end: 'cancel' | 'unpaid' | 'past_due';
};

export type Settings = { dunning: Dunning };

export const usualSettings = (): Settings => ({ dunning: { retryDays: [3, 5, 7], end: 'cancel' } });

/** Everything that a request may look at and change. Handlers are synchronous: one runs to its end before the next. */
export class World {
	settings = usualSettings();
	/** The request that is being executed, for the events it causes. */
	request: { id: string; key: string | null } | undefined;
	private pinned: number | undefined;

	constructor(
		public state: State,
		/** Whether there is a webhook, so that events have somebody who waits for them. */
		readonly hasWebhook: boolean,
		private readonly onEvent: (event: Event) => void
	) {}

	get objects() {
		return this.state.objects;
	}

	/** @returns Unix seconds on the clock of a customer, or on everybody's */
	now(customer?: string | null): number {
		if (this.pinned !== undefined) return this.pinned;
		const { all, customers } = this.state.clock;
		const ahead = customer == null ? 0 : (customers[customer] ?? 0);
		return Math.floor(Date.now() / 1000) + all + ahead;
	}

	/** Does something as if it were another time. */
	at<T>(time: number, work: () => T): T {
		const before = this.pinned;
		this.pinned = time;
		try {
			return work();
		} finally {
			this.pinned = before;
		}
	}

	/** Records an event with the object as it is now, and sends it once the request has been answered. */
	emit(type: EventType, subject: EventSubject, previous?: { [name: string]: unknown }): Event {
		const event: Event = {
			id: newId('evt'),
			object: 'event',
			api_version: apiVersion,
			// By the real clock, whatever time the object believes it to be: receivers list events since they last looked.
			created: Math.floor(Date.now() / 1000),
			data: {
				object: structuredClone(subject),
				...(previous === undefined ? {} : { previous_attributes: structuredClone(previous) })
			},
			livemode: false,
			pending_webhooks: this.hasWebhook ? 1 : 0,
			request: { id: this.request?.id ?? null, idempotency_key: this.request?.key ?? null },
			type
		};
		this.objects.events[event.id] = event;
		this.onEvent(event);
		return event;
	}

	/** Changes an object and tells of it with what it was before; without a change there is no event. */
	change<T extends EventSubject>(type: EventType, subject: T, work: () => void): void {
		const before: unknown = structuredClone(subject);
		work();
		const previous = differences(before, subject);
		if (Object.keys(previous).length > 0) this.emit(type, subject, previous);
	}
}

type Fields = { [name: string]: unknown };

const isFields = (value: unknown): value is Fields =>
	typeof value === 'object' && value !== null && !Array.isArray(value);

/** What of the older object differs from the newer one; lists count as a whole. */
export function differences(before: unknown, after: unknown): Fields {
	const differing: Fields = {};
	if (!isFields(before) || !isFields(after)) return differing;
	for (const name of new Set([...Object.keys(before), ...Object.keys(after)])) {
		const [old, now] = [before[name], after[name]];
		if (JSON.stringify(old) === JSON.stringify(now)) continue;
		if (isFields(old) && isFields(now) && old.object !== 'list') differing[name] = differences(old, now);
		else differing[name] = old ?? null;
	}
	return differing;
}
