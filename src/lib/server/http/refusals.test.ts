import { isHttpError } from '@sveltejs/kit';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { ConflictError, ForbiddenError, NotFoundError } from '../access/errors';
import { log } from '../log';
import { orHttpError } from './errors';
import { orFormFault } from './forms';

const underWay = vi.hoisted(() => ({ event: undefined as unknown }));
vi.mock('$app/server', () => ({
	getRequestEvent: () => {
		if (underWay.event === undefined) throw new Error('no request');
		return underWay.event;
	}
}));

const line = vi.spyOn(log, 'warn').mockImplementation(() => undefined);

beforeEach(() => {
	line.mockClear();
	underWay.event = {
		locals: {
			person: { id: 'p1' },
			membership: { organisationId: 'o1', roles: ['reader'] },
			requestId: 'r1'
		},
		route: { id: '/(app)/reports/[id=uuid]' },
		request: { method: 'POST' },
		url: new URL('https://noonmark.example/reports/secret?token=secret')
	};
});

const refused = {
	person: 'p1',
	organisation: 'o1',
	route: '/(app)/reports/[id=uuid]',
	method: 'POST',
	requestId: 'r1'
};

describe('a refusal', () => {
	it.each([
		['what may not be seen', new NotFoundError('report'), 404],
		['what may not be done', new ForbiddenError('Your role does not allow this.'), 403]
	])('of %s leaves one line, and the answer stays the same', async (_what, cause, status) => {
		const answer = await orHttpError(Promise.reject(cause)).catch((thrown: unknown) => thrown);
		expect(isHttpError(answer, status)).toBe(true);
		expect(line.mock.calls).toEqual([[{ ...refused, status }, 'access refused']]);
	});

	it('of a form leaves the same line', async () => {
		const form = orFormFault({ setHeaders: () => undefined }, Promise.reject(new NotFoundError()), {
			password: 'secret'
		});
		await expect(form).rejects.toMatchObject({ status: 404 });
		expect(line.mock.calls).toEqual([[{ ...refused, status: 404 }, 'access refused']]);
		expect(JSON.stringify(line.mock.calls)).not.toContain('secret');
	});

	it('is told of strangers too, and of nothing else', async () => {
		underWay.event = {
			...(underWay.event as object),
			locals: { person: null, membership: null, requestId: 'r2' }
		};
		await orHttpError(Promise.reject(new NotFoundError())).catch(() => undefined);
		expect(line.mock.calls[0]?.[0]).toMatchObject({ person: null, organisation: null, requestId: 'r2' });
		await orHttpError(Promise.reject(new ConflictError('Saved meanwhile.'))).catch(() => undefined);
		expect(await orHttpError(Promise.resolve('fine'))).toBe('fine');
		expect(line).toHaveBeenCalledTimes(1);
	});

	it('outside of a request is an error like any other', async () => {
		underWay.event = undefined;
		await expect(orHttpError(Promise.reject(new NotFoundError()))).rejects.toMatchObject({ status: 404 });
		expect(line).not.toHaveBeenCalled();
	});
});
