import type { Call, Routes } from '../core/call';
import { invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { Price } from '../core/wire';
import type { World } from '../core/world';

const intervals = ['day', 'week', 'month', 'year'] as const;

/** @throws ApiError where another price has the key and it is not to be moved */
function takeLookupKey(world: World, key: string, transfer: boolean): void {
	const holder = Object.values(world.objects.prices).find(({ lookup_key }) => lookup_key === key);
	if (holder === undefined) return;
	if (!transfer)
		throw invalidRequest(
			`A price (\`${holder.id}\`) already uses that lookup key. Pass \`transfer_lookup_key\` to move it.`,
			{ param: 'lookup_key' }
		);
	world.change('price.updated', holder, () => {
		holder.lookup_key = null;
	});
}

function create({ world, params }: Call): Price {
	const currency = params.required('currency');
	const product = params.string('product');
	const recurring = params.child('recurring');
	const given = {
		unit_amount: params.integer('unit_amount', { least: 0 }),
		active: params.boolean('active'),
		lookup_key: params.string('lookup_key'),
		transfer: params.boolean('transfer_lookup_key') ?? false,
		nickname: params.text('nickname'),
		metadata: params.metadata(),
		tax_behavior: params.oneOf('tax_behavior', ['exclusive', 'inclusive', 'unspecified']),
		interval: recurring?.oneOf('interval', intervals),
		interval_count: recurring?.integer('interval_count', { least: 1 }) ?? 1,
		usage_type: recurring?.oneOf('usage_type', ['licensed'])
	};
	params.oneOf('billing_scheme', ['per_unit']);
	if (product === undefined) throw params.missing('product');
	if (given.unit_amount === undefined) throw params.missing('unit_amount');
	if (recurring !== undefined && given.interval === undefined) throw recurring.missing('interval');
	if (!/^[a-z]{3}$/.test(currency)) throw params.refuse('currency', `Invalid currency: ${currency}`);
	params.done();
	find(world, 'products', product, 'product');
	if (given.lookup_key !== undefined) takeLookupKey(world, given.lookup_key, given.transfer);
	const price: Price = {
		id: newId('price'),
		object: 'price',
		active: given.active ?? true,
		billing_scheme: 'per_unit',
		created: world.now(),
		currency,
		custom_unit_amount: null,
		livemode: false,
		lookup_key: given.lookup_key ?? null,
		metadata: mergeMetadata(null, given.metadata),
		nickname: given.nickname ?? null,
		product,
		recurring:
			given.interval === undefined
				? null
				: {
						interval: given.interval,
						interval_count: given.interval_count,
						meter: null,
						trial_period_days: null,
						usage_type: 'licensed'
					},
		tax_behavior: given.tax_behavior ?? 'unspecified',
		tiers_mode: null,
		transform_quantity: null,
		type: given.interval === undefined ? 'one_time' : 'recurring',
		unit_amount: given.unit_amount,
		unit_amount_decimal: String(given.unit_amount)
	};
	world.objects.prices[price.id] = price;
	world.emit('price.created', price);
	return price;
}

/** The amount is no parameter: a price that costs something else is another price. */
function update({ world, params, ids: [id = ''] }: Call): Price {
	const price = find(world, 'prices', id);
	const given = {
		active: params.boolean('active'),
		lookup_key: params.string('lookup_key'),
		transfer: params.boolean('transfer_lookup_key') ?? false,
		nickname: params.text('nickname'),
		metadata: params.metadata()
	};
	params.done();
	if (given.lookup_key !== undefined && given.lookup_key !== price.lookup_key)
		takeLookupKey(world, given.lookup_key, given.transfer);
	world.change('price.updated', price, () => {
		price.active = given.active ?? price.active;
		price.lookup_key = given.lookup_key ?? price.lookup_key;
		if (given.nickname !== undefined) price.nickname = given.nickname;
		price.metadata = mergeMetadata(price.metadata, given.metadata);
	});
	return price;
}

function list({ world, params }: Call) {
	const active = params.boolean('active');
	const product = params.string('product');
	const currency = params.string('currency');
	const type = params.oneOf('type', ['one_time', 'recurring']);
	const keys = params.strings('lookup_keys');
	const interval = params.child('recurring')?.oneOf('interval', intervals);
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	if ((keys?.length ?? 0) > 10)
		throw params.refuse('lookup_keys', 'You can look up at most 10 keys at once.');
	params.done();
	const found = newestFirst(world.objects.prices).filter(
		(price) =>
			(active === undefined || price.active === active) &&
			(product === undefined || price.product === product) &&
			(currency === undefined || price.currency === currency) &&
			(type === undefined || price.type === type) &&
			(keys === undefined || (price.lookup_key !== null && keys.includes(price.lookup_key))) &&
			(interval === undefined || price.recurring?.interval === interval) &&
			isWithin(price.created, created)
	);
	return pageOf(found, paging, '/v1/prices', 'price');
}

function retrieve({ world, params, ids: [id = ''] }: Call): Price {
	params.done();
	return find(world, 'prices', id);
}

export const prices: Routes = {
	'POST /v1/prices': create,
	'GET /v1/prices': list,
	'GET /v1/prices/:id': retrieve,
	'POST /v1/prices/:id': update
};
