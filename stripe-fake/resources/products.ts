import type { Call, Routes } from '../core/call';
import { invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { Product } from '../core/wire';

function create({ world, params }: Call): Product {
	const given = {
		id: params.string('id'),
		name: params.required('name'),
		active: params.boolean('active'),
		description: params.text('description'),
		metadata: params.metadata(),
		unit_label: params.text('unit_label'),
		statement_descriptor: params.text('statement_descriptor'),
		url: params.text('url')
	};
	params.ignore('tax_code', 'shippable');
	params.done();
	const id = given.id ?? newId('prod');
	if (world.objects.products[id] !== undefined)
		throw invalidRequest(`Product already exists.`, { code: 'resource_already_exists', param: 'id' });
	const now = world.now();
	const product: Product = {
		id,
		object: 'product',
		active: given.active ?? true,
		created: now,
		default_price: null,
		description: given.description ?? null,
		images: [],
		livemode: false,
		marketing_features: [],
		metadata: mergeMetadata(null, given.metadata),
		name: given.name,
		package_dimensions: null,
		shippable: null,
		statement_descriptor: given.statement_descriptor ?? null,
		tax_code: null,
		tax_details: null,
		type: 'service',
		unit_label: given.unit_label ?? null,
		updated: now,
		url: given.url ?? null
	};
	world.objects.products[id] = product;
	world.emit('product.created', product);
	return product;
}

function update({ world, params, ids: [id = ''] }: Call): Product {
	const product = find(world, 'products', id);
	const given = {
		name: params.string('name'),
		active: params.boolean('active'),
		description: params.text('description'),
		metadata: params.metadata(),
		unit_label: params.text('unit_label'),
		default_price: params.string('default_price')
	};
	params.done();
	if (given.default_price !== undefined) find(world, 'prices', given.default_price, 'default_price');
	world.change('product.updated', product, () => {
		product.name = given.name ?? product.name;
		product.active = given.active ?? product.active;
		if (given.description !== undefined) product.description = given.description;
		if (given.unit_label !== undefined) product.unit_label = given.unit_label;
		product.metadata = mergeMetadata(product.metadata, given.metadata);
		product.default_price = given.default_price ?? product.default_price;
		product.updated = world.now();
	});
	return product;
}

function list({ world, params }: Call) {
	const active = params.boolean('active');
	const ids = params.strings('ids');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.products).filter(
		(product) =>
			(active === undefined || product.active === active) &&
			(ids === undefined || ids.includes(product.id)) &&
			isWithin(product.created, created)
	);
	return pageOf(found, paging, '/v1/products', 'product');
}

function retrieve({ world, params, ids: [id = ''] }: Call): Product {
	params.done();
	return find(world, 'products', id);
}

export const products: Routes = {
	'POST /v1/products': create,
	'GET /v1/products': list,
	'GET /v1/products/:id': retrieve,
	'POST /v1/products/:id': update
};
