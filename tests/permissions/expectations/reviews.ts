import type { Entry } from '../entry';

/* The second pair of eyes: sending, reading, remarks, own figures, decisions. */

const route = '/(app)/reports/[id=uuid]';
const at = '/reports/:inReview';
const review = { route: `${route}/review`, at: `${at}/review` } as const;

const sending: Entry[] = [
	{
		route: `${route}/send`,
		what: 'page',
		at: '/reports/:report/send',
		needs: 'write reports',
		done: '200'
	},
	{
		route: `${route}/send`,
		what: 'action default',
		at: '/reports/:report/send',
		form: { reviewers: ':reviewerPerson', note: '', version: '2' },
		needs: 'write reports',
		done: '303 /reports/:report?done=sent',
		mixed: { reviewerPerson: '400' },
		why: 'who cannot be asked is a fault of the form, which says no more than that'
	},
	{
		route,
		what: 'action recall',
		at,
		needs: 'write reports',
		done: '303 /reports/:inReview?done=recalled'
	},
	{
		route,
		what: 'action reopen',
		at: '/reports/:approved',
		needs: 'write reports',
		done: '303 /reports/:approved?done=reopened'
	}
];

const remarks: Entry[] = [
	{ ...review, what: 'page', needs: 'read reports', done: '200' },
	{
		...review,
		what: 'action remark',
		form: { place: 'text.answer', body: 'Is this the mean?' },
		needs: 'remark on reports',
		done: '303 ?done=remark#line-text_answer'
	},
	{
		...review,
		what: 'action answer',
		form: { commentId: ':comment', body: 'It is.' },
		needs: 'remark on reports',
		done: '303 ?done=answer#remark-:comment'
	},
	{
		...review,
		what: 'action settle',
		form: { commentId: ':comment' },
		needs: 'remark on reports',
		done: '303 ?done=settled#remark-:comment'
	},
	{
		...review,
		what: 'action unsettle',
		form: { commentId: ':settledComment' },
		needs: 'remark on reports',
		done: '303 ?done=unsettled#remark-:settledComment'
	}
];

const recomputing: Entry[] = [
	{ ...review, what: 'action recompute', needs: 'read reports', done: '200' },
	{
		...review,
		what: 'action preview',
		needs: 'read reports',
		done: '303 /reports/:inReview/previews/:new'
	}
];

const figures: Entry[] = [
	{
		...review,
		what: 'action figure',
		form: {
			runId: ':run',
			output: 'solarReflectanceIndex',
			kind: 'value',
			value: '83',
			unit: '',
			giveOrTake: '',
			averages: '',
			route: 'by hand'
		},
		needs: 'review reports',
		done: '303 ?done=figure#figure-:new',
		mixed: { run: '400' },
		why: 'a run that is not among those of the report is a fault of the form, whosever it is'
	},
	{
		...review,
		what: 'action withdraw',
		form: { figureId: ':figure' },
		needs: 'review reports',
		done: '303 ?done=withdrawn#figure-:figure',
		prepare: async (kit) => ({ figure: await kit.ownFigure(kit.ids.inReview ?? '') })
	}
];

const deciding: Entry[] = [
	{
		...review,
		what: 'action return',
		form: { reasons: 'The source of the emittance is missing.' },
		needs: 'review reports',
		done: '303 /reports/:inReview?done=returned'
	},
	{
		route: `${route}/review/approve`,
		what: 'page',
		at: `${at}/review/approve`,
		needs: 'review reports',
		done: '200'
	},
	{
		route: `${route}/review/approve`,
		what: 'action default',
		at: `${at}/review/approve`,
		form: { statement: 'Recomputed by hand.', digest: ':digest' },
		sample: { digest: '0'.repeat(64) },
		needs: 'review reports',
		done: '303 /reports/:inReview?done=approved',
		prepare: async (kit) => ({ digest: await kit.digestOf(kit.ids.inReview ?? '') })
	}
];

export const reviewEntries: readonly Entry[] = [
	...sending,
	...remarks,
	...recomputing,
	...figures,
	...deciding
];
