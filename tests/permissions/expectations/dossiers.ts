import { distinctPng } from '../dossier';
import type { Entry } from '../entry';

/* Dossiers and their files. */

const fields = {
	title: 'Paving',
	question: 'How hot?',
	client: '',
	clientContact: '',
	scope: '',
	reliance: '',
	projectNumber: '',
	orderNumber: ''
};

const dossier = { route: '/(app)/dossiers/[id=uuid]', at: '/dossiers/:dossier' } as const;

const ofDossiers: Entry[] = [
	{ route: '/(app)/dossiers', what: 'page', at: '/dossiers', needs: 'read dossiers', done: '200' },
	{
		route: '/(app)/dossiers',
		what: 'action restore',
		at: '/dossiers',
		form: { id: ':deletedDossier' },
		needs: 'write dossiers',
		done: '303 /dossiers/:deletedDossier'
	},
	{ route: '/(app)/dossiers/new', what: 'page', at: '/dossiers/new', needs: 'write dossiers', done: '200' },
	{
		route: '/(app)/dossiers/new',
		what: 'action default',
		at: '/dossiers/new',
		form: fields,
		needs: 'write dossiers',
		done: '303 /dossiers/:new'
	},
	{ ...dossier, what: 'page', needs: 'read dossiers', done: '200' },
	{
		...dossier,
		at: '/dossiers/:emptyDossier',
		what: 'action delete',
		needs: 'write dossiers',
		done: '303 /dossiers?deleted=:emptyDossier'
	},
	{
		route: '/(app)/dossiers/[id=uuid]/edit',
		what: 'page',
		at: '/dossiers/:dossier/edit',
		needs: 'write dossiers',
		done: '200'
	},
	{
		route: '/(app)/dossiers/[id=uuid]/edit',
		what: 'action default',
		at: '/dossiers/:dossier/edit',
		form: { ...fields, version: '1' },
		needs: 'write dossiers',
		done: '303 /dossiers/:dossier'
	}
];

const files: Entry[] = [
	{
		...dossier,
		what: 'action upload',
		file: { field: 'file', name: 'survey.png', bytes: distinctPng },
		needs: 'add evidence',
		done: '303 /dossiers/:dossier#evidence'
	},
	{
		...dossier,
		what: 'action deleteFile',
		form: { id: ':evidence' },
		needs: 'add evidence',
		done: '303 /dossiers/:dossier?deleted-file=:evidence#evidence'
	},
	{
		...dossier,
		what: 'action restoreFile',
		form: { id: ':deletedEvidence' },
		needs: 'add evidence',
		done: '303 /dossiers/:dossier#evidence'
	},
	{
		route: '/(app)/evidence/[id=uuid]',
		what: 'GET',
		at: '/evidence/:evidence',
		needs: 'read dossiers',
		done: '200'
	}
];

const people = { route: '/(app)/dossiers/[id=uuid]/people', at: '/dossiers/:dossier/people' } as const;

const ofPeople: Entry[] = [
	{ ...people, what: 'page', needs: 'read dossiers', done: '200' },
	{
		...people,
		what: 'action invite',
		form: { email: 'guest@people.example' },
		needs: 'invite guests',
		done: '200'
	},
	{
		...people,
		what: 'action resend',
		form: { id: ':guestInvitation' },
		needs: 'invite guests',
		done: '200',
		except: { guest: '404' },
		why: 'a guest is not told of invitations'
	},
	{
		...people,
		what: 'action revoke',
		form: { id: ':guestInvitation' },
		needs: 'invite guests',
		done: '200',
		except: { guest: '404' },
		why: 'a guest is not told of invitations'
	},
	{
		...people,
		what: 'action end',
		form: { userId: ':guestPerson', certain: 'yes' },
		needs: 'invite guests',
		done: '200'
	},
	{
		...people,
		what: 'action leave',
		form: { certain: 'yes' },
		needs: 'read dossiers',
		done: '303 /account?notice=left#organisations',
		except: { owner: '404', author: '404', reviewer: '404', reader: '404' },
		why: 'a member is no guest of a dossier that could be left'
	}
];

export const dossierEntries: readonly Entry[] = [...ofDossiers, ...files, ...ofPeople];
