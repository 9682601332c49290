import type { Entry } from '../entry';

/* Links to issued reports: made and revoked by members, opened by whoever holds one. */

const links = { route: '/(app)/reports/[id=uuid]/links', at: '/reports/:issued/links' } as const;

const byLink = {
	needs: 'nothing',
	done: '200',
	shows: ['own', 'foreign'],
	why: 'the link is the proof; without an account it opens its one report'
} as const;

export const sharingEntries: readonly Entry[] = [
	{ ...links, what: 'page', needs: 'share reports', done: '200' },
	{
		...links,
		what: 'action make',
		form: { recipient: 'The client', expiresInDays: '30' },
		needs: 'share reports',
		done: '200'
	},
	{ ...links, what: 'action revoke', form: { linkId: ':link' }, needs: 'share reports', done: '200' },
	{ route: '/(public)/shared/[token]', what: 'page', at: '/shared/:shareToken', ...byLink },
	{
		route: '/(public)/shared/[token]/report.pdf',
		what: 'GET',
		at: '/shared/:shareToken/report.pdf',
		...byLink
	},
	{
		route: '/(public)/shared/[token]/record.json',
		what: 'GET',
		at: '/shared/:shareToken/record.json',
		...byLink
	}
];
