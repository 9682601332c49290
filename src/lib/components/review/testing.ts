import type { CommentView, ReviewLine, ReviewPerson, RoundView } from '$lib/server/reviews/types';

/* Plain things for the tests of this folder; people and words are invented. */

export const reviewer: ReviewPerson = { id: 'r', name: 'Colm Hadley', guest: false };
export const author: ReviewPerson = { id: 'a', name: 'Ines Tarrow', guest: false };

export function line(place: string, given: Partial<ReviewLine> = {}): ReviewLine {
	return {
		place,
		section: 'Roof',
		label: place,
		text: 'text',
		source: null,
		changed: null,
		comments: [],
		...given
	};
}

export function remark(given: Partial<CommentView> = {}): CommentView {
	return {
		id: 'c1',
		place: 'text.answer',
		round: 1,
		quoted: 'text',
		lineChanged: false,
		body: 'Which sheet was measured?',
		writtenBy: reviewer,
		writtenAt: new Date('2026-12-01T10:00:00Z'),
		settledAt: null,
		settledBy: null,
		answers: [],
		...given
	};
}

export function round(given: Partial<RoundView> = {}): RoundView {
	return {
		id: 'round-1',
		round: 1,
		state: 'open',
		sentBy: author,
		sentAt: new Date('2026-12-01T09:00:00Z'),
		note: '',
		askedOf: [reviewer],
		decidedBy: null,
		decidedAt: null,
		statement: '',
		independent: true,
		voidReason: null,
		...given
	};
}
