import { smallPdf } from '$lib/server/testing/files';
import type { Entry } from '../entry';

/* For everybody, signed in or not. */

const pages: Entry[] = [
	{ route: '/(public)', what: 'layout', at: '/', needs: 'nothing', done: '200' },
	{ route: '/(public)', what: 'page', at: '/', needs: 'nothing', done: '200' },
	{ route: '/(public)/methods', what: 'page', at: '/methods', needs: 'nothing', done: '200' },
	{
		route: '/(public)/methods/[method]',
		what: 'page',
		at: '/methods/solar-reflectance-index',
		needs: 'nothing',
		done: '200'
	}
];

const verification: Entry[] = [
	{ route: '/(public)/verify', what: 'page', at: '/verify', needs: 'nothing', done: '200' },
	{
		route: '/(public)/verify',
		what: 'action file',
		at: '/verify',
		file: { field: 'file', name: 'other.pdf', bytes: () => smallPdf('not a report') },
		needs: 'nothing',
		done: '200'
	},
	{
		route: '/(public)/verify',
		what: 'action code',
		at: '/verify',
		form: { code: ':code' },
		needs: 'nothing',
		done: '303 /verify/:code'
	},
	{
		route: '/(public)/verify/[code]',
		what: 'page',
		at: '/verify/:code',
		needs: 'nothing',
		done: '200',
		shows: ['own', 'foreign'],
		why: 'the code is printed on the report, whose title and issuer the page says to who holds it'
	},
	{
		route: '/(public)/verify/[code]',
		what: 'action default',
		at: '/verify/:code',
		file: { field: 'file', name: 'other.pdf', bytes: () => smallPdf('not a report') },
		needs: 'nothing',
		done: '200',
		shows: ['own', 'foreign'],
		why: 'as its page'
	},
	{ route: '/(public)/verify/root.pem', what: 'GET', at: '/verify/root.pem', needs: 'nothing', done: '200' }
];

const probes: Entry[] = [
	{ route: '/healthz', what: 'GET', at: '/healthz', needs: 'nothing', done: '200' },
	{ route: '/readyz', what: 'GET', at: '/readyz', needs: 'nothing', done: '200' }
];

const webhook: Entry = {
	route: '/(public)/webhooks/stripe',
	what: 'POST',
	at: '/webhooks/stripe',
	json: { id: 'evt_matrix', type: 'invoice.paid' },
	needs: 'nothing',
	done: '400',
	why: 'no person may: an event without the signature of the payment service is refused, whoever sends it'
};

export const publicEntries: readonly Entry[] = [webhook, ...pages, ...verification, ...probes];
