import { setTimeout as sleep } from 'node:timers/promises';
import type { Failure, Failures } from '../control/failures';
import type { Handler } from '../core/call';
import { ApiError, invalidRequest, type ErrorBody } from '../core/errors';
import { expand, requireShallow } from '../core/expand';
import { decodeForm, type FormTree } from '../core/form';
import { newId } from '../core/ids';
import { Params } from '../core/params';
import type { KeptAnswer, State } from '../core/state';
import { apiVersion } from '../core/version';
import type { World } from '../core/world';
import { routes } from '../resources/routes';
import { json, type HttpAnswer, type HttpRequest } from './answer';

export type LoggedRequest = {
	at: number;
	id: string;
	method: string;
	path: string;
	form: FormTree;
	idempotencyKey: string | null;
	status: number | null;
};

const mostLogged = 1000;

type Route = { method: string; pattern: RegExp; handler: Handler };

const table: Route[] = Object.entries(routes).map(([route, handler]) => {
	const [method = '', path = ''] = route.split(' ');
	return { method, pattern: new RegExp(`^${path.replaceAll(/:\w+/g, '([^/]+)')}$`), handler };
});

function findRoute(method: string, path: string): { handler: Handler; ids: string[] } {
	for (const { method: wanted, pattern, handler } of table) {
		const found = wanted === method ? pattern.exec(path) : null;
		if (found !== null) return { handler, ids: found.slice(1).map(decodeURIComponent) };
	}
	throw new ApiError(404, {
		type: 'invalid_request_error',
		message: `Unrecognized request URL (${method}: ${path}). Please see https://stripe.com/docs or we can help at https://support.stripe.com/.`
	});
}

/** @throws ApiError 401 */
function requireKey(authorization: string | undefined, key: string): void {
	const [scheme = '', value = ''] = (authorization ?? '').split(' ');
	const given =
		scheme.toLowerCase() === 'basic'
			? (Buffer.from(value, 'base64').toString().split(':')[0] ?? '')
			: scheme.toLowerCase() === 'bearer'
				? value
				: '';
	if (given === key) return;
	throw new ApiError(401, {
		type: 'invalid_request_error',
		message:
			given === ''
				? 'You did not provide an API key. You need to provide your API key in the Authorization header, using Bearer auth.'
				: `Invalid API Key provided: ${given.slice(0, 8)}${'*'.repeat(8)}${given.slice(-4)}`
	});
}

function requireVersion(version: string | undefined): void {
	if (version !== undefined && version !== apiVersion)
		throw invalidRequest(`Invalid Stripe API version: ${version}. This stand-in speaks ${apiVersion} only.`);
}

/** Speaks the API: keys, idempotency, errors. One instance a server. */
export class Api {
	readonly requests: LoggedRequest[] = [];
	private readonly running = new Set<string>();

	constructor(
		private readonly world: World,
		private readonly key: string,
		private readonly failures: Failures
	) {}

	async answer(request: HttpRequest): Promise<HttpAnswer> {
		const id = newId('req');
		const { method, path } = request;
		const idempotencyKey = method === 'POST' ? (request.headers['idempotency-key'] ?? null) : null;
		const form = decodeForm([request.query, request.body].filter((part) => part !== '').join('&'));
		const logged: LoggedRequest = {
			at: Date.now(),
			id,
			method,
			path,
			form: structuredClone({ ...form }),
			idempotencyKey,
			status: null
		};
		this.requests.push(logged);
		if (this.requests.length > mostLogged) this.requests.shift();
		let answer: HttpAnswer;
		try {
			requireKey(request.headers.authorization, this.key);
			requireVersion(request.headers['stripe-version']);
			answer =
				idempotencyKey === null
					? await this.carryOut(id, request, form, null)
					: await this.onlyOnce(id, request, form, idempotencyKey);
		} catch (error) {
			answer = this.asAnswer(id, error);
		}
		logged.status = answer.reset === true ? null : answer.status;
		answer.headers = {
			'request-id': id,
			'stripe-version': apiVersion,
			'cache-control': 'no-cache, no-store',
			...(idempotencyKey === null ? {} : { 'idempotency-key': idempotencyKey }),
			...answer.headers
		};
		return answer;
	}

	/** @throws ApiError where the key stands for another request, or one that is still running */
	private async onlyOnce(id: string, request: HttpRequest, form: FormTree, key: string): Promise<HttpAnswer> {
		if (key.length > 255)
			throw invalidRequest('Idempotency keys can be at most 255 characters long.', {
				param: 'idempotency_key'
			});
		const kept = this.world.state.keptAnswers[key];
		if (kept !== undefined) return replay(kept, request, JSON.stringify(form), key);
		if (this.running.has(key))
			throw new ApiError(
				409,
				{
					type: 'idempotency_error',
					code: 'idempotency_key_in_use',
					message: `There is currently another in-progress request using this Stripe-Idempotent-Key (that probably means you submitted twice, and the other request is still going through): ${key}.`
				},
				{ 'stripe-should-retry': 'true' }
			);
		this.running.add(key);
		try {
			return await this.carryOut(id, request, form, key);
		} finally {
			this.running.delete(key);
		}
	}

	private async carryOut(
		id: string,
		request: HttpRequest,
		form: FormTree,
		key: string | null
	): Promise<HttpAnswer> {
		const failure = this.failures.take(request.method, request.path);
		if (failure?.delayMilliseconds !== undefined) await sleep(failure.delayMilliseconds);
		if (failure !== undefined && failure.after !== true) {
			const failed = asFailure(failure);
			if (failed !== undefined) return failed;
		}
		const { answer, began } = this.execute(id, request, form, key);
		const failed = failure === undefined ? undefined : asFailure(failure);
		// A connection that breaks after the work hides the true answer; a fault of the service is itself the answer.
		const kept = failed === undefined || failed.reset === true ? answer : failed;
		if (key !== null && began)
			this.world.state.keptAnswers[key] = {
				method: request.method,
				path: request.path,
				form: JSON.stringify(form),
				status: kept.status,
				body: kept.body.toString(),
				requestId: id,
				at: Date.now()
			};
		return failed ?? answer;
	}

	/** @returns also whether it began: what was refused for its parameters may be tried again with the same key */
	private execute(
		id: string,
		request: HttpRequest,
		form: FormTree,
		key: string | null
	): { answer: HttpAnswer; began: boolean } {
		const params = new Params(form);
		this.world.request = { id, key };
		try {
			const paths = params.strings('expand') ?? [];
			requireShallow(paths);
			const { handler, ids } = findRoute(request.method, request.path);
			const before =
				paths.length > 0 && request.method === 'POST' ? structuredClone(this.world.state) : undefined;
			const answer = handler({ world: this.world, params, ids });
			return { answer: json(200, this.expanded(answer, paths, before)), began: params.finished };
		} catch (error) {
			return { answer: this.asAnswer(id, error), began: params.finished };
		} finally {
			this.world.request = undefined;
		}
	}

	/** A path that cannot be expanded is a fault of the request: then nothing has happened. */
	private expanded(answer: object, paths: string[], before: State | undefined): object {
		try {
			return expand(this.world, answer, paths);
		} catch (error) {
			if (before !== undefined) this.world.state = before;
			throw error;
		}
	}

	private asAnswer(id: string, error: unknown): HttpAnswer {
		if (!(error instanceof ApiError)) {
			console.error(error);
			return json(500, { error: { type: 'api_error', message: 'An error occurred in the stand-in.' } });
		}
		const body: ErrorBody = {
			...error.body,
			...(error.body.code === undefined || error.body.doc_url !== undefined
				? {}
				: { doc_url: `https://stripe.com/docs/error-codes/${error.body.code.replaceAll('_', '-')}` }),
			request_log_url: `${this.world.state.base}/_control/requests/${id}`
		};
		return json(error.status, { error: body }, error.headers);
	}
}

function replay(kept: KeptAnswer, request: HttpRequest, form: string, key: string): HttpAnswer {
	if (kept.method !== request.method || kept.path !== request.path || kept.form !== form)
		throw new ApiError(400, {
			type: 'idempotency_error',
			message:
				kept.path === request.path
					? `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${key}' if you meant to execute a different request.`
					: `Keys for idempotent requests can only be used for the same endpoint they were first used for ('${request.path}' vs '${kept.path}'). Try using a key other than '${key}' if you meant to execute a different request.`
		});
	return {
		status: kept.status,
		headers: {
			'content-type': 'application/json',
			'idempotent-replayed': 'true',
			'original-request': kept.requestId
		},
		body: kept.body
	};
}

const usualTypes: { [status: number]: string } = {
	400: 'invalid_request_error',
	401: 'invalid_request_error',
	402: 'card_error',
	403: 'invalid_request_error',
	404: 'invalid_request_error',
	409: 'invalid_request_error',
	429: 'invalid_request_error'
};

function asFailure(failure: Failure): HttpAnswer | undefined {
	if (failure.reset === true) return { status: 0, headers: {}, body: '', reset: true };
	if (failure.status === undefined) return undefined;
	return json(
		failure.status,
		{
			error: {
				type: failure.type ?? usualTypes[failure.status] ?? 'api_error',
				...(failure.code === undefined
					? failure.status === 429
						? { code: 'rate_limit' }
						: {}
					: { code: failure.code }),
				message: failure.message ?? `This request was told to fail with ${failure.status}.`
			}
		},
		failure.headers
	);
}
