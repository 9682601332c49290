import { newId } from '../core/ids';
import type { Delivery, State } from '../core/state';
import type { Event } from '../core/wire';
import { signatureHeader } from './signature';

export type Webhook = {
	url: string;
	/** Several, separated by commas, while one is being replaced. */
	secret: string;
	/** Seconds to wait before each further attempt; after the last one the event is given up. */
	retrySeconds?: number[];
	/** A receiver that takes longer has failed. */
	timeoutMilliseconds?: number;
};

/** Seconds: soon at first, since a receiver in development is mostly just restarting; more than four hours in all. */
const usualRetries = [1, 2, 5, 10, 20, 40, 60, 120, 300, 600, 1800, 3600, 7200];

export type Behaviour = {
	/** `hold` keeps events until they are released, `drop` loses them for good. */
	mode: 'normal' | 'hold' | 'drop';
	/** How the events of one burst follow each other. */
	order: 'as made' | 'reversed' | 'shuffled';
	/** How many more times each event is sent. */
	duplicates: number;
	delayMilliseconds: number;
	/** How many are sent at the same time; with 1 they arrive in the order in which they are sent. */
	atOnce: number;
};

export const usualBehaviour = (): Behaviour => ({
	mode: 'normal',
	order: 'as made',
	duplicates: 0,
	delayMilliseconds: 0,
	atOnce: 4
});

export type Redelivery = {
	/** Unix seconds to sign with instead of now. */
	at?: number;
	secret?: string;
	/** Sent in place of the event's own body, under the signature of the own body. */
	body?: string;
};

function arranged(deliveries: Delivery[], order: Behaviour['order']): Delivery[] {
	if (order === 'reversed') return [...deliveries].reverse();
	if (order === 'as made') return deliveries;
	const left = [...deliveries];
	const mixed: Delivery[] = [];
	while (left.length > 0) mixed.push(...left.splice(Math.floor(Math.random() * left.length), 1));
	return mixed;
}

/** Sends events to the webhook, after the request that caused them has been answered. */
export class Deliverer {
	behaviour = usualBehaviour();
	private readonly ready: Delivery[] = [];
	private readonly timers = new Set<NodeJS.Timeout>();
	private running = 0;
	private stopped = false;
	private waiting: (() => void)[] = [];

	constructor(
		private readonly state: () => State,
		private readonly webhook: Webhook | undefined,
		private readonly onChange: () => void
	) {}

	/** Takes up what was on its way when the state was last written. */
	resume(): void {
		for (const delivery of Object.values(this.state().deliveries))
			if (delivery.state === 'queued' || delivery.state === 'waiting')
				this.later(delivery, Math.max(0, delivery.nextAt - Date.now()));
	}

	add(event: Event): void {
		if (this.webhook === undefined) return;
		const { mode, duplicates } = this.behaviour;
		for (let copy = 0; copy <= duplicates; copy += 1) {
			const id = newId('dlv');
			this.state().deliveries[id] = {
				id,
				event: event.id,
				type: event.type,
				state: mode === 'hold' ? 'held' : mode === 'drop' ? 'dropped' : 'queued',
				nextAt: Date.now(),
				attempts: []
			};
		}
	}

	/** Sends what has been added. */
	flush(): void {
		const fresh = Object.values(this.state().deliveries).filter(
			(delivery) =>
				delivery.state === 'queued' && delivery.attempts.length === 0 && !this.scheduled.has(delivery.id)
		);
		this.sendAll(fresh);
	}

	private readonly scheduled = new Set<string>();

	private sendAll(deliveries: Delivery[]): void {
		for (const delivery of arranged(deliveries, this.behaviour.order)) {
			this.scheduled.add(delivery.id);
			if (this.behaviour.delayMilliseconds > 0) this.later(delivery, this.behaviour.delayMilliseconds);
			else this.ready.push(delivery);
		}
		setImmediate(() => this.pump());
	}

	/** Sends what is held. @param order of the held events; as the behaviour says unless given */
	release(order?: Behaviour['order']): number {
		const held = Object.values(this.state().deliveries).filter(({ state }) => state === 'held');
		for (const delivery of held) delivery.state = 'queued';
		const before = this.behaviour.order;
		this.behaviour.order = order ?? before;
		this.sendAll(held);
		this.behaviour.order = before;
		return held.length;
	}

	/** Sends an event once more. @returns the status that the webhook answered, null where it did not */
	async redeliver(eventId: string, how: Redelivery = {}): Promise<number | null> {
		const event = this.state().objects.events[eventId];
		if (event === undefined) throw new Error(`There is no event ${eventId}.`);
		const delivery: Delivery = {
			id: newId('dlv'),
			event: event.id,
			type: event.type,
			state: 'waiting',
			nextAt: Date.now(),
			attempts: []
		};
		this.state().deliveries[delivery.id] = delivery;
		this.scheduled.add(delivery.id);
		this.running += 1;
		const status = await this.attempt(delivery, how);
		delivery.state = status !== null && status < 300 ? 'delivered' : 'given up';
		this.finished();
		return status;
	}

	deliveries(): Delivery[] {
		return Object.values(this.state().deliveries);
	}

	/** Resolves once nothing is being sent or about to be; what waits for another attempt does not count. */
	async settle(): Promise<void> {
		if (this.running === 0 && this.ready.length === 0 && !this.hasFresh()) return;
		await new Promise<void>((resolve) => this.waiting.push(resolve));
	}

	private hasFresh(): boolean {
		return this.deliveries().some(({ state }) => state === 'queued');
	}

	private later(delivery: Delivery, milliseconds: number): void {
		this.scheduled.add(delivery.id);
		const timer = setTimeout(() => {
			this.timers.delete(timer);
			this.ready.push(delivery);
			this.pump();
		}, milliseconds);
		timer.unref();
		this.timers.add(timer);
	}

	private pump(): void {
		while (!this.stopped && this.running < this.behaviour.atOnce) {
			const delivery = this.ready.shift();
			if (delivery === undefined) break;
			this.running += 1;
			void this.send(delivery);
		}
		this.wake();
	}

	private async send(delivery: Delivery): Promise<void> {
		const status = await this.attempt(delivery, {});
		const event = this.state().objects.events[delivery.event];
		const retries = this.webhook?.retrySeconds ?? usualRetries;
		const wait = retries[delivery.attempts.length - 1];
		if (status !== null && status >= 200 && status < 300) {
			delivery.state = 'delivered';
			if (event !== undefined) event.pending_webhooks = 0;
		} else if (wait === undefined) {
			delivery.state = 'given up';
		} else {
			delivery.state = 'waiting';
			delivery.nextAt = Date.now() + wait * 1000;
			if (!this.stopped) this.later(delivery, wait * 1000);
		}
		this.finished();
	}

	private finished(): void {
		this.running -= 1;
		this.onChange();
		this.pump();
	}

	private wake(): void {
		if (this.running > 0 || this.ready.length > 0 || this.hasFresh()) return;
		for (const resolve of this.waiting.splice(0)) resolve();
	}

	private async attempt(delivery: Delivery, how: Redelivery): Promise<number | null> {
		const event = this.state().objects.events[delivery.event];
		if (this.webhook === undefined || event === undefined) return null;
		const began = Date.now();
		// As it was when it happened: later changes of the object do not reach it.
		const body = JSON.stringify({ ...event, pending_webhooks: 1 }, null, 2);
		const header = signatureHeader(
			body,
			how.secret ?? this.webhook.secret,
			how.at ?? Math.floor(began / 1000)
		);
		let status: number | null = null;
		let error: string | null = null;
		try {
			const response = await fetch(this.webhook.url, {
				method: 'POST',
				redirect: 'manual',
				headers: {
					'content-type': 'application/json; charset=utf-8',
					'user-agent': 'Stripe/1.0 (+https://stripe.com/docs/webhooks)',
					'stripe-signature': header
				},
				body: how.body ?? body,
				signal: AbortSignal.timeout(this.webhook.timeoutMilliseconds ?? 20_000)
			});
			status = response.status;
			await response.arrayBuffer();
		} catch (failure) {
			error = failure instanceof Error ? `${failure.name}: ${failure.message}` : String(failure);
		}
		delivery.attempts.push({ at: began, status, error, milliseconds: Date.now() - began });
		return status;
	}

	/** Sends nothing more; what is left is taken up at the next start. */
	stop(): void {
		this.stopped = true;
		for (const timer of this.timers) clearTimeout(timer);
		this.timers.clear();
	}

	/** Forgets everything, for a new beginning. */
	reset(): void {
		for (const timer of this.timers) clearTimeout(timer);
		this.timers.clear();
		this.ready.splice(0);
		this.scheduled.clear();
		this.behaviour = usualBehaviour();
		this.wake();
	}
}
