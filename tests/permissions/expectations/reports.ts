import type { Entry } from '../entry';

/* Reports, their previews and their issue. */

const route = '/(app)/reports/[id=uuid]';
const at = '/reports/:report';
const reading = { needs: 'read reports', done: '200' } as const;

const text = {
	title: 'Memo',
	question: 'How hot?',
	background: '',
	answer: 'Warm.',
	commentary: '',
	leftOut: '',
	commissionedBy: ''
};

const writing: Entry[] = [
	{ route: '/(app)/reports', what: 'page', at: '/reports', ...reading },
	{
		route: '/(app)/dossiers/[id=uuid]/reports/new',
		what: 'page',
		at: '/dossiers/:dossier/reports/new',
		needs: 'write reports',
		done: '200'
	},
	{
		route: '/(app)/dossiers/[id=uuid]/reports/new',
		what: 'action default',
		at: '/dossiers/:dossier/reports/new',
		form: { run: ':run' },
		needs: 'write reports',
		done: '303 /reports/:new'
	},
	{ route, what: 'page', at, ...reading },
	{
		route,
		what: 'action save',
		at,
		form: { ...text, runIds: ':run', version: '2' },
		needs: 'write reports',
		done: '200'
	},
	{
		route,
		what: 'action delete',
		at,
		needs: 'write reports',
		done: '303 /dossiers/:dossier?deleted-report=:report#reports'
	},
	{
		route,
		what: 'action undo',
		at: '/reports/:deletedReport',
		needs: 'write reports',
		done: '303 /reports/:deletedReport'
	}
];

const previews: Entry[] = [
	{ route: `${route}/previews/[preview=uuid]`, what: 'page', at: `${at}/previews/:preview`, ...reading },
	{
		route: `${route}/previews/[preview=uuid]/file.pdf`,
		what: 'GET',
		at: `${at}/previews/:preview/file.pdf`,
		...reading,
		mixed: { report: '200' },
		why: 'the preview is its own; the report in its address is not looked at'
	},
	{ route: '/(app)/api/previews/[id=uuid]', what: 'GET', at: '/api/previews/:preview', ...reading }
];

const issuing: Entry[] = [
	{
		route: `${route}/issue`,
		what: 'page',
		at: `${at}/issue`,
		needs: 'issue reports',
		done: '200'
	},
	{
		route: `${route}/issue`,
		what: 'action default',
		at: `${at}/issue`,
		needs: 'issue reports',
		done: '303 /reports/:report'
	},
	{ route: `${route}/file.pdf`, what: 'GET', at: '/reports/:issued/file.pdf', ...reading },
	{
		route: '/(app)/api/reports/[id=uuid]/issue',
		what: 'GET',
		at: '/api/reports/:issued/issue',
		...reading
	}
];

export const reportEntries: readonly Entry[] = [...writing, ...previews, ...issuing];
