import { newDraft } from '$lib/calculation/new-draft';
import type { Entry } from '../entry';

/* Calculations, step by step, and their runs. */

const route = '/(app)/calculations/[id=uuid]';
const at = '/calculations/:calculation';
const reading = { needs: 'read calculations', done: '200' } as const;

/** A step of the form: its page, and its submission, which saves and goes on. */
function step(name: string, form: Entry['form'], done: string, folder = name): Entry[] {
	return [
		{ route: `${route}/${folder}`, what: 'page', at: `${at}/${name}`, ...reading },
		{
			route: `${route}/${folder}`,
			what: 'action default',
			at: `${at}/${name}`,
			form: form ?? {},
			needs: 'write calculations',
			done
		}
	];
}

const history = { route: `${route}/history`, at: `${at}/history` } as const;

const steps: Entry[] = [
	{ route, what: 'layout', at, ...reading },
	{ route, what: 'page', at, needs: 'read calculations', done: '307 /calculations/:calculation/check' },
	...step('question', { next: 'close' }, '303 /dossiers/:dossier'),
	...step('method', { next: 'close' }, '303 /dossiers/:dossier'),
	...step('inputs/surface', { next: 'close' }, '303 /dossiers/:dossier', 'inputs/[group]'),
	...step('compare', { next: 'close' }, '303 /dossiers/:dossier'),
	...step('evaluation', { next: 'close' }, '303 /dossiers/:dossier'),
	...step('check', {}, '303 /calculations/:calculation/result'),
	...step('result', {}, '303 /calculations/:calculation/result')
];

const past: Entry[] = [
	{ ...history, what: 'page', ...reading },
	{
		...history,
		what: 'action bringBack',
		form: { version: '1' },
		needs: 'write calculations',
		done: '303 /calculations/:calculation/check'
	},
	{
		...history,
		what: 'action duplicate',
		needs: 'write calculations',
		done: '303 /calculations/:new/question'
	},
	{
		...history,
		what: 'action delete',
		needs: 'write calculations',
		done: '303 /dossiers/:dossier?deleted-calculation=:calculation#calculations'
	},
	{
		...history,
		at: '/calculations/:deletedCalculation/history',
		what: 'action undo',
		needs: 'write calculations',
		done: '303 /dossiers/:dossier#calculations',
		except: { owner: '404', reviewer: '404', reader: '404', guest: '404' },
		why: 'who cannot bring back what was put away does not see it either'
	}
];

const runs: Entry[] = [
	{
		route: `${route}/runs/[run=uuid]/record.json`,
		what: 'GET',
		at: `${at}/runs/:run/record.json`,
		...reading
	},
	{
		route: `${route}/runs/[run=uuid]/figures/[file]`,
		what: 'GET',
		at: `${at}/runs/:run/figures/indexOverReflectance.csv`,
		...reading
	},
	{ route: '/(app)/api/runs/[id=uuid]', what: 'GET', at: '/api/runs/:run', ...reading }
];

const others: Entry[] = [
	{ route: '/(app)/calculations', what: 'page', at: '/calculations', ...reading },
	{
		route: '/(app)/dossiers/[id=uuid]/calculations/new',
		what: 'page',
		at: '/dossiers/:dossier/calculations/new',
		needs: 'write calculations',
		done: '200'
	},
	{
		route: '/(app)/dossiers/[id=uuid]/calculations/new',
		what: 'action default',
		at: '/dossiers/:dossier/calculations/new',
		form: { title: 'Another sheet', kind: 'find-value' },
		needs: 'write calculations',
		done: '303 /calculations/:new/method'
	},
	{
		route: '/(app)/api/calculations/[id=uuid]/draft',
		what: 'PUT',
		at: '/api/calculations/:calculation/draft',
		json: { draft: newDraft('find-value'), baseVersion: 2 },
		needs: 'write calculations',
		done: '200'
	},
	{
		route: '/(app)/api/preview',
		what: 'POST',
		at: '/api/preview',
		json: newDraft('find-value'),
		needs: 'read calculations',
		done: '200'
	}
];

export const calculationEntries: readonly Entry[] = [...steps, ...past, ...runs, ...others];
