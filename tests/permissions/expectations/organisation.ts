import type { Entry } from '../entry';

/* The organisation, its members and their roles. */

const here = { route: '/(app)/organisation', at: '/organisation' } as const;

const authorOfInvitations = {
	except: { author: { own: '403', foreign: '404' } },
	why: 'authors manage the invitations of guests, so one that is not there is not found before it can be refused'
} satisfies Partial<Entry>;

export const organisationEntries: readonly Entry[] = [
	{ route: '/(app)', what: 'layout', at: '/dossiers', needs: 'organisation', done: '200' },
	{ ...here, what: 'page', needs: 'see the organisation', done: '200' },
	{
		...here,
		what: 'action save',
		form: { name: 'Wexcombe Partners', address: '1 Weir Lane', numberPrefix: 'QM', selfApproval: 'yes' },
		needs: 'run the organisation',
		done: '200'
	},
	{
		...here,
		what: 'action roles',
		form: { userId: ':member', roles: ['reader', 'reviewer'] },
		needs: 'manage members',
		done: '200'
	},
	{
		...here,
		what: 'action remove',
		form: { userId: ':member', certain: 'yes' },
		needs: 'manage members',
		done: '200'
	},
	{
		...here,
		what: 'action invite',
		form: { email: 'somebody@people.example', roles: 'reader' },
		needs: 'manage members',
		done: '200'
	},
	{
		...here,
		what: 'action resend',
		form: { id: ':memberInvitation' },
		needs: 'manage members',
		done: '200',
		...authorOfInvitations
	},
	{
		...here,
		what: 'action revoke',
		form: { id: ':memberInvitation' },
		needs: 'manage members',
		done: '200',
		...authorOfInvitations
	},
	{ route: '/(app)/organisation/new', what: 'page', at: '/organisation/new', needs: 'session', done: '200' },
	{
		route: '/(app)/organisation/new',
		what: 'action default',
		at: '/organisation/new',
		form: { name: '', address: '', numberPrefix: '' },
		needs: 'session',
		done: '400'
	}
];
