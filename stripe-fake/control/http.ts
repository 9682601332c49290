import { json, type HttpAnswer, type HttpRequest } from '../http/answer';
import type { Control } from './control';
import type { Failure } from './failures';

type Body = { [name: string]: unknown };

const isBody = (value: unknown): value is Body =>
	typeof value === 'object' && value !== null && !Array.isArray(value);

function read(body: string): Body {
	if (body === '') return {};
	const value: unknown = JSON.parse(body);
	if (!isBody(value)) throw new Error('The body must be a JSON object.');
	return value;
}

function text(body: Body, name: string): string | undefined {
	const value = body[name];
	if (value !== undefined && typeof value !== 'string') throw new Error(`${name} must be a text.`);
	return value;
}

function number(body: Body, name: string): number | undefined {
	const value = body[name];
	if (value !== undefined && typeof value !== 'number') throw new Error(`${name} must be a number.`);
	return value;
}

function flag(body: Body, name: string): boolean | undefined {
	const value = body[name];
	if (value !== undefined && typeof value !== 'boolean') throw new Error(`${name} must be true or false.`);
	return value;
}

function oneOf<const T extends string>(body: Body, name: string, values: readonly T[]): T | undefined {
	const value = text(body, name);
	const found = values.find((allowed) => allowed === value);
	if (value !== undefined && found === undefined)
		throw new Error(`${name} must be one of ${values.join(', ')}.`);
	return found;
}

/** Only what was given, so that the rest keeps its value. */
const given = <T extends object>(fields: T): Partial<T> =>
	Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined)) as Partial<T>;

const orders = ['as made', 'reversed', 'shuffled'] as const;

const span = (body: Body) => ({ seconds: number(body, 'seconds'), days: number(body, 'days') });

function customerOf(body: Body): string {
	const customer = text(body, 'customer');
	if (customer === undefined) throw new Error('customer is missing.');
	return customer;
}

function failure(body: Body): Failure {
	const headers = body.headers;
	return {
		method: text(body, 'method'),
		path: text(body, 'path'),
		times: number(body, 'times'),
		status: number(body, 'status'),
		type: text(body, 'type'),
		code: text(body, 'code'),
		message: text(body, 'message'),
		reset: flag(body, 'reset'),
		after: flag(body, 'after'),
		delayMilliseconds: number(body, 'delayMilliseconds'),
		headers: isBody(headers)
			? Object.fromEntries(Object.entries(headers).map(([name, value]) => [name, String(value)]))
			: undefined
	};
}

function settings(body: Body) {
	const days = body.retryDays;
	return {
		dunning: given({
			retryDays: Array.isArray(days) ? days.map(Number) : undefined,
			end: oneOf(body, 'end', ['cancel', 'unpaid', 'past_due'])
		})
	};
}

const actions: { [route: string]: (control: Control, body: Body) => unknown } = {
	'GET ready': () => ({ ready: true }),
	'POST advance': (control, body) => control.advance({ customer: text(body, 'customer'), ...span(body) }),
	'POST age': (control, body) => control.age({ customer: customerOf(body), ...span(body) }),
	'POST webhooks': (control, body) =>
		control.webhooks(
			given({
				mode: oneOf(body, 'mode', ['normal', 'hold', 'drop']),
				order: oneOf(body, 'order', orders),
				duplicates: number(body, 'duplicates'),
				delayMilliseconds: number(body, 'delayMilliseconds'),
				atOnce: number(body, 'atOnce')
			})
		),
	'POST release': (control, body) => ({ released: control.release(oneOf(body, 'order', orders)) }),
	'POST redeliver': async (control, body) => ({
		status: await control.redeliver(
			text(body, 'event') ?? '',
			given({ at: number(body, 'at'), secret: text(body, 'secret'), body: text(body, 'body') })
		)
	}),
	'GET deliveries': (control) => control.deliveries(),
	'POST settle': async (control) => {
		await control.settle();
		return control.deliveries();
	},
	'POST fail': (control, body) => {
		control.failNext(failure(body));
		return {};
	},
	'GET requests': (control) => control.requests(),
	'POST settings': (control, body) => control.settings(settings(body)),
	'POST reset': (control) => {
		control.reset();
		return {};
	}
};

/** `/_control/…`: JSON in, JSON out. */
export async function answerControl(control: Control, request: HttpRequest): Promise<HttpAnswer> {
	// A page in somebody's browser must not turn the tests' controls.
	if (request.headers.origin !== undefined) return json(403, { error: 'Browsers are not let in here.' });
	const name = request.path.slice('/_control/'.length);
	const [first = '', id] = name.split('/');
	if (request.method === 'GET' && first === 'requests' && id !== undefined) {
		const found = control.requests().find((each) => each.id === id);
		return found === undefined ? json(404, { error: 'There is no such request.' }) : json(200, found);
	}
	const action = actions[`${request.method} ${name}`];
	if (action === undefined) return json(404, { error: `There is only ${Object.keys(actions).join(', ')}.` });
	try {
		return json(200, await action(control, read(request.body)));
	} catch (error) {
		return json(400, { error: error instanceof Error ? error.message : String(error) });
	}
}
