import { runDue } from '../billing/cycle';
import { emptyState, type Delivery } from '../core/state';
import { usualSettings, type Settings, type World } from '../core/world';
import type { Behaviour, Deliverer, Redelivery } from '../events/deliver';
import type { LoggedRequest } from '../http/api';
import { age } from './age';
import type { Failure, Failures } from './failures';

export type Span = { seconds?: number; days?: number };

const day = 86_400;

const secondsOf = ({ seconds = 0, days = 0 }: Span): number => {
	const span = seconds + days * day;
	if (!Number.isFinite(span) || span < 0 || span > 3660 * day)
		throw new Error('Give a time from 0 to ten years, as seconds or days.');
	return Math.round(span);
};

/** What tests turn: nothing of it is part of Stripe's API. */
export class Control {
	constructor(
		private readonly world: World,
		private readonly deliverer: Deliverer,
		private readonly failures: Failures,
		private readonly log: LoggedRequest[],
		private readonly onChange: () => void
	) {}

	/** Moves the clock of a customer, or everybody's, ahead, and does what falls due on the way. */
	advance({ customer, ...span }: Span & { customer?: string }): { now: number; done: number } {
		const { clock } = this.world.state;
		const ahead = secondsOf(span);
		if (customer === undefined) clock.all += ahead;
		else {
			this.requireCustomer(customer);
			clock.customers[customer] = (clock.customers[customer] ?? 0) + ahead;
		}
		const done = runDue(this.world, customer);
		this.changed();
		return { now: this.world.now(customer), done };
	}

	/**
	 * Moves the past of a customer back instead, so that what was to come falls due by the real clock: for receivers that
	 * compare periods with their own time.
	 */
	age({ customer, ...span }: Span & { customer: string }): { now: number; done: number } {
		this.requireCustomer(customer);
		age(this.world, customer, secondsOf(span));
		const done = runDue(this.world, customer);
		this.changed();
		return { now: this.world.now(customer), done };
	}

	private requireCustomer(customer: string): void {
		if (this.world.objects.customers[customer] === undefined)
			throw new Error(`There is no customer ${customer}.`);
	}

	/** How the webhook is to be served from now on; what is left out stays. */
	webhooks(behaviour: Partial<Behaviour>): Behaviour {
		this.deliverer.behaviour = { ...this.deliverer.behaviour, ...behaviour };
		return this.deliverer.behaviour;
	}

	/** Sends what was held, and holds no more. */
	release(order?: Behaviour['order']): number {
		this.deliverer.behaviour.mode = 'normal';
		return this.deliverer.release(order);
	}

	async redeliver(event: string, how?: Redelivery): Promise<number | null> {
		return await this.deliverer.redeliver(event, how);
	}

	deliveries(): Delivery[] {
		return this.deliverer.deliveries();
	}

	/** Waits until every event has been sent once. */
	async settle(): Promise<void> {
		await this.deliverer.settle();
	}

	failNext(failure: Failure): void {
		this.failures.add(failure);
	}

	/** Requests to the API, oldest first. */
	requests(): LoggedRequest[] {
		return this.log;
	}

	settings(given: { dunning?: Partial<Settings['dunning']> } = {}): Settings {
		const { dunning } = this.world.settings;
		this.world.settings = { dunning: { ...dunning, ...given.dunning } };
		return this.world.settings;
	}

	/** Forgets everything. */
	reset(): void {
		this.world.state = emptyState(this.world.state.base);
		this.world.settings = usualSettings();
		this.failures.clear();
		this.log.splice(0);
		this.deliverer.reset();
		this.onChange();
	}

	private changed(): void {
		this.onChange();
		this.deliverer.flush();
	}
}
