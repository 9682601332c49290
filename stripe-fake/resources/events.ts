import type { Call, Routes } from '../core/call';
import { find } from '../core/find';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import type { Event, List } from '../core/wire';

function retrieve({ world, params, ids: [id = ''] }: Call): Event {
	params.done();
	return find(world, 'events', id);
}

/** @param pattern a type, or one that ends in `.*` */
const fits = (type: string, pattern: string): boolean =>
	pattern.endsWith('*') ? type.startsWith(pattern.slice(0, -1)) : type === pattern;

function list({ world, params }: Call): List<Event> {
	const type = params.string('type');
	const types = params.strings('types');
	const delivered = params.boolean('delivery_success');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	if ((types?.length ?? 0) > 20) throw params.refuse('types', 'You may pass up to 20 types.');
	params.done();
	const found = newestFirst(world.objects.events).filter(
		(event) =>
			(type === undefined || fits(event.type, type)) &&
			(types === undefined || types.some((pattern) => fits(event.type, pattern))) &&
			(delivered === undefined || (event.pending_webhooks === 0) === delivered) &&
			isWithin(event.created, created)
	);
	return pageOf(found, paging, '/v1/events', 'event');
}

export const events: Routes = { 'GET /v1/events': list, 'GET /v1/events/:id': retrieve };
