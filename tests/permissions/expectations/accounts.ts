import type { Entry } from '../entry';
import { password } from '../people';

/* Signing up, in and out, and one's own account. */

/** Where each starts who is signed in. */
const home = {
	newcomer: '303 /organisation/new',
	owner: '303 /dossiers',
	billing: '303 /billing',
	author: '303 /dossiers',
	reviewer: '303 /dossiers',
	reader: '303 /dossiers',
	guest: '303 /dossiers',
	'guest elsewhere': '303 /dossiers'
} as const;

/** A token of the right form that opens nothing. */
const noToken = 'A'.repeat(43);

const withoutAccount: Entry[] = [
	{ route: '/(auth)/sign-up', what: 'page', at: '/sign-up', needs: 'nothing', done: '200' },
	{
		route: '/(auth)/sign-up',
		what: 'action default',
		at: '/sign-up',
		form: { name: '', email: '', password: '' },
		needs: 'nothing',
		done: '400'
	},
	{ route: '/(auth)/sign-up/confirm', what: 'page', at: '/sign-up/confirm', needs: 'nothing', done: '200' },
	{
		route: '/(auth)/sign-up/confirm',
		what: 'action default',
		at: '/sign-up/confirm',
		form: { email: '' },
		needs: 'nothing',
		done: '400'
	},
	{
		route: '/(auth)/confirm/[token]',
		what: 'page',
		at: `/confirm/${noToken}`,
		needs: 'nothing',
		done: '200'
	},
	{
		route: '/(auth)/confirm/[token]',
		what: 'action default',
		at: `/confirm/${noToken}`,
		form: { password },
		needs: 'nothing',
		done: '400'
	},
	{ route: '/(auth)/reset', what: 'page', at: '/reset', needs: 'nothing', done: '200' },
	{
		route: '/(auth)/reset',
		what: 'action default',
		at: '/reset',
		form: { email: '' },
		needs: 'nothing',
		done: '400'
	},
	{ route: '/(auth)/reset/[token]', what: 'page', at: `/reset/${noToken}`, needs: 'nothing', done: '200' },
	{
		route: '/(auth)/reset/[token]',
		what: 'action default',
		at: `/reset/${noToken}`,
		form: { password },
		needs: 'nothing',
		done: '400'
	},
	{
		route: '/(auth)/sign-in',
		what: 'page',
		at: '/sign-in',
		needs: 'nothing',
		done: '200',
		except: home,
		why: 'who is signed in goes to their work'
	},
	{
		route: '/(auth)/sign-in',
		what: 'action default',
		at: '/sign-in',
		form: { email: '', password: '' },
		needs: 'nothing',
		done: '400',
		except: home,
		why: 'as its page, which the answer is shown on'
	},
	{
		route: '/(auth)/sign-out',
		what: 'POST',
		at: '/sign-out',
		needs: 'nothing',
		done: '303 /sign-in?notice=signed-out',
		endsSession: true
	}
];

const account = { route: '/(app)/account', at: '/account', needs: 'session' } as const;

const ownAccount: Entry[] = [
	{ ...account, what: 'page', done: '200' },
	{ ...account, what: 'action name', form: { name: 'Renamed' }, done: '200' },
	{
		...account,
		what: 'action password',
		form: { current: 'not the present one', next: 'umbrella kettle voyage 10' },
		done: '400'
	},
	{
		...account,
		what: 'action revoke',
		form: { session: ':ownSession' },
		done: '200',
		prepare: async (kit) => ({ ownSession: await kit.anotherSession() })
	},
	{ ...account, what: 'action revokeOthers', done: '200', last: true },
	{
		...account,
		what: 'action switch',
		form: { organisationId: ':organisation' },
		done: '303 /dossiers',
		except: {
			newcomer: '404',
			billing: { own: '303 /billing', foreign: '404' }
		},
		why: 'newcomers belong to none; billing contacts start at what they may see'
	},
	{
		...account,
		what: 'action leave',
		form: { organisationId: ':leftOrganisation', certain: 'yes' },
		done: '303 /account?notice=left#organisations',
		last: true,
		prepare: async (kit) => ({ leftOrganisation: await kit.anotherOrganisation() })
	}
];

/** Of an invitation, by its link: for whoever holds that, and to accept for its addressee alone. */
const invitation: Entry[] = [
	{
		route: '/(auth)/invitation/[token]',
		what: 'page',
		at: '/invitation/:invitationToken',
		needs: 'nothing',
		done: '200',
		shows: ['own', 'foreign'],
		why: 'the holder of the link reads what it invites to'
	},
	{
		route: '/(auth)/invitation/[token]',
		what: 'action default',
		at: '/invitation/:invitationToken',
		needs: 'session',
		done: '303 /dossiers/:dossier',
		foreign: '403',
		why: 'an invitation of somebody else: told so',
		prepare: async (kit) => ({ invitationToken: await kit.invitation() }),
		shows: ['own', 'foreign']
	}
];

export const accountEntries: readonly Entry[] = [...withoutAccount, ...ownAccount, ...invitation];
