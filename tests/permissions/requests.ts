import { filled, isChange, isEndpoint, type Entry, type Values } from './entry';
import { send, type Answer, type Sent } from './http';

/* How an entry becomes a request, and an answer an outcome that can be compared. */

export interface Session {
	address: string;
	/** What the cookie holds; null for a stranger. */
	token: string | null;
	/** Gives each person a network address of their own, since some tries are counted by it. */
	index: number;
}

const form = 'application/x-www-form-urlencoded';

function deeplyFilled(value: unknown, values: Values): unknown {
	if (typeof value === 'string') return filled(value, values);
	if (Array.isArray(value)) return value.map((one) => deeplyFilled(one, values));
	if (value === null || typeof value !== 'object') return value;
	return Object.fromEntries(Object.entries(value).map(([key, one]) => [key, deeplyFilled(one, values)]));
}

function encoded(fields: NonNullable<Entry['form']>, values: Values): URLSearchParams {
	const body = new URLSearchParams();
	for (const [name, given] of Object.entries(fields))
		for (const one of [given].flat()) body.append(name, filled(one, values));
	return body;
}

function multipart(entry: Entry, values: Values): { type: string; body: Buffer } {
	const boundary = 'matrix-boundary-7d1f';
	const parts: Buffer[] = [];
	for (const [name, value] of encoded(entry.form ?? {}, values))
		parts.push(
			Buffer.from(`--${boundary}\r\ncontent-disposition: form-data; name="${name}"\r\n\r\n${value}\r\n`)
		);
	if (entry.file !== undefined) {
		const { field, name, bytes } = entry.file;
		const head = `--${boundary}\r\ncontent-disposition: form-data; name="${field}"; filename="${name}"\r\ncontent-type: application/octet-stream\r\n\r\n`;
		parts.push(Buffer.from(head), bytes(), Buffer.from('\r\n'));
	}
	parts.push(Buffer.from(`--${boundary}--\r\n`));
	return { type: `multipart/form-data; boundary=${boundary}`, body: Buffer.concat(parts) };
}

function bodyOf(entry: Entry, values: Values): { type: string; body: Buffer } | undefined {
	if (!isChange(entry)) return undefined;
	if (entry.file !== undefined) return multipart(entry, values);
	if (entry.json !== undefined)
		return { type: 'application/json', body: Buffer.from(JSON.stringify(deeplyFilled(entry.json, values))) };
	return { type: form, body: Buffer.from(encoded(entry.form ?? {}, values).toString()) };
}

/** An entry as the request that a page of the service would send. */
export function asRequest(entry: Entry, values: Values, session: Session): Sent {
	const what = bodyOf(entry, values);
	const headers: Record<string, string> = {
		accept: isEndpoint(entry) ? 'application/json' : 'text/html',
		...(session.token !== null && { cookie: `noonmark-session=${session.token}` }),
		...(isChange(entry) && { origin: session.address }),
		...(what !== undefined && { 'content-type': what.type })
	};
	const path = filled(entry.at, values);
	const [, action] = /^action (.*)$/.exec(entry.what) ?? [];
	const method = isEndpoint(entry) ? entry.what : isChange(entry) ? 'POST' : 'GET';
	const named =
		action === undefined || action === 'default' ? '' : `${path.includes('?') ? '&' : '?'}/${action}`;
	return { method, path: path + named, headers, body: what?.body };
}

/** A form sent by somebody, for what an entry needs to be there. */
export async function post(
	session: Session,
	path: string,
	fields: NonNullable<Entry['form']>
): Promise<Answer> {
	const headers: Record<string, string> = {
		accept: 'text/html',
		origin: session.address,
		'content-type': form,
		...(session.token !== null && { cookie: `noonmark-session=${session.token}` })
	};
	const body = Buffer.from(encoded(fields, {}).toString());
	return sendAs(session, { method: 'POST', path, headers, body });
}

export function sendAs(session: Session, sent: Sent): Promise<Answer> {
	return send(session.address, sent, `127.0.1.${session.index + 1}`);
}

const payments = process.env.E2E_STRIPE ?? '';
const uuids = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g;

/** An address with its ids by name; those that the fixtures do not have are new. */
function byName(location: string, address: string, values: Values): string {
	const names = new Map(Object.entries(values).map(([name, value]) => [value, name]));
	const path = location.startsWith(address) ? location.slice(address.length) : location;
	// Pages for paying have addresses of the payment service's own making.
	if (payments !== '' && path.startsWith(payments)) return 'payments/:new';
	if (path.startsWith('/sign-in?returnTo=')) return '/sign-in';
	const named = path.replace(uuids, (id) => `:${names.get(id) ?? 'new'}`);
	const { code } = values;
	return code === undefined ? named : named.replaceAll(code, ':code');
}

/** Status, and where a redirect leads. */
export function outcomeOf({ status, headers }: Answer, address: string, values: Values): string {
	if (status < 300 || status >= 400) return String(status);
	return `${status} ${byName(headers.location ?? 'nowhere', address, values)}`;
}

interface DataAnswer {
	type: 'data' | 'redirect';
	location?: string;
	nodes?: ({ type: 'data' | 'skip' | 'error'; status?: number } | null)[];
}

/** Path of the data of one load alone, all others left out: `depth` is its place in the page's branch. */
export function loadAlone(path: string, depth: number, leaf: number): string {
	const [pathname = '', query = ''] = path.split('?');
	const mask = Array.from({ length: leaf + 1 }, (_, i) => (i === depth ? '1' : '0')).join('');
	const base = pathname === '/' ? '' : pathname;
	return `${base}/__data.json?${query === '' ? '' : `${query}&`}x-sveltekit-invalidated=${mask}`;
}

/** The same of a load asked for alone: what its page would have answered for it. */
export function outcomeOfLoad(
	{ status, body }: Answer,
	address: string,
	values: Values,
	depth: number
): string {
	if (status !== 200) return `${status} instead of data`;
	// Values that come later follow on lines of their own.
	const data = JSON.parse(body.toString('utf8').split('\n')[0] ?? '') as DataAnswer;
	if (data.type === 'redirect') return `30x ${byName(data.location ?? 'nowhere', address, values)}`;
	const node = data.nodes?.[depth];
	if (node?.type === 'data') return '200';
	const fault = data.nodes?.find((one) => one?.type === 'error');
	if (fault !== undefined) return String(fault?.status ?? 500);
	return `no data (${node?.type ?? 'no node'})`;
}

/** What an answer says, for people: its first words without markup. */
export function gist({ body }: Answer): string {
	const main = /<main[\s\S]*<\/main>/.exec(body.toString('utf8'))?.[0] ?? body.toString('utf8');
	return main
		.replace(/<[^>]*>/g, ' ')
		.replace(/\s+/g, ' ')
		.slice(0, 400);
}
