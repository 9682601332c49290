import { isHttpError, isRedirect, type Handle, type RequestEvent } from '@sveltejs/kit';
import { paymentOrigins } from '../billing/payment-page';
import { env } from '../env';
import { log } from '../log';
import { addSharedHeaders, isSharedPath } from './shared-pages';

/** For answers that are no pages (pages bring a policy with nonces): nothing may run, load or be framed. */
const strictPolicy = [
	"default-src 'none'",
	"base-uri 'none'",
	"form-action 'none'",
	"object-src 'none'",
	"frame-ancestors 'none'"
].join('; ');

/** A PDF is drawn by the browser's own viewer, which styles itself; our pages may show one in a frame. */
const pdfPolicy = [
	"default-src 'none'",
	"base-uri 'none'",
	"form-action 'none'",
	"object-src 'none'",
	"style-src 'unsafe-inline'",
	"img-src 'self' data:",
	"frame-ancestors 'self'"
].join('; ');

const fixed: Readonly<Record<string, string>> = {
	'x-content-type-options': 'nosniff',
	// Same origin only: nothing leaks to other sites, and forms still state their origin.
	'referrer-policy': 'same-origin',
	'permissions-policy':
		'accelerometer=(), browsing-topics=(), camera=(), display-capture=(), geolocation=(), gyroscope=(), ' +
		'magnetometer=(), microphone=(), midi=(), payment=(), publickey-credentials-get=(), usb=()',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin'
};

/** Adds what is missing to an answer's headers; a route that set a stricter value of its own keeps it. */
export function addSecurityHeaders(headers: Headers, https: boolean): void {
	for (const [name, value] of Object.entries(fixed)) {
		if (!headers.has(name)) headers.set(name, value);
	}
	if (https) headers.set('strict-transport-security', 'max-age=63072000; includeSubDomains');
	if (!headers.has('content-security-policy')) {
		const isPdf = headers.get('content-type')?.startsWith('application/pdf') === true;
		headers.set('content-security-policy', isPdf ? pdfPolicy : strictPolicy);
	}
	// What is made for one reader is kept by nobody; a route with something public says so itself.
	if (!headers.has('cache-control')) headers.set('cache-control', 'no-store');
}

const isBillingPath = (path: string) => path === '/billing' || path.startsWith('/billing/');

/** Lets the forms of a page lead to further origins: a browser holds a form to the policy through redirects as well. */
export function letFormsLeadTo(headers: Headers, origins: readonly string[]): void {
	const policy = headers.get('content-security-policy');
	if (policy === null) return;
	const widened = policy.replace(
		/(^|;\s*)form-action 'self'(?=;|$)/,
		`$1form-action 'self' ${origins.join(' ')}`
	);
	headers.set('content-security-policy', widened);
}

/** Shown when not even a page can be made, such as while the database is away. */
function bareErrorPage(requestId: string): Response {
	const html =
		'<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><title>Something failed · Noonmark</title></head>' +
		'<body><main><h1>Something went wrong on our side.</h1>' +
		'<p>Nothing that you saved before is lost. Please try again in a minute.</p>' +
		`<p>If you write to us about it, give this number: ${requestId}</p></main></body></html>`;
	return new Response(html, { status: 500, headers: { 'content-type': 'text/html; charset=utf-8' } });
}

/**
 * A redirect thrown by an inner hook would pass this one by; a plain one is answered here. The framework's own client
 * asks for redirects in a form of its own, which stays with the framework.
 */
function answerThrown(thrown: unknown, event: RequestEvent): Response {
	const isPlain = !event.isDataRequest && event.request.headers.get('accept') !== 'application/json';
	if (isRedirect(thrown)) {
		if (!isPlain) throw thrown;
		return new Response(null, { status: thrown.status, headers: { location: thrown.location } });
	}
	if (isHttpError(thrown) || !isPlain) throw thrown;
	const { requestId } = event.locals;
	log.error({ err: thrown, errorId: requestId, route: event.route.id }, 'request failed before its page');
	return bareErrorPage(requestId);
}

export const securityHeaders: Handle = async ({ event, resolve }) => {
	let response: Response;
	try {
		response = await resolve(event);
	} catch (thrown) {
		response = answerThrown(thrown, event);
	}
	if (isSharedPath(event.url.pathname)) addSharedHeaders(response.headers);
	if (isBillingPath(event.url.pathname)) letFormsLeadTo(response.headers, paymentOrigins());
	addSecurityHeaders(response.headers, new URL(env().ORIGIN).protocol === 'https:');
	return response;
};
