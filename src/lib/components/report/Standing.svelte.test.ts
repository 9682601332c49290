import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import type { ReviewState } from '$lib/server/reviews/types';
import { reviewer, round } from '../review/testing';
import Standing from './Standing.svelte';

const nothing: ReviewState = {
	state: 'draft',
	rounds: [],
	approval: null,
	unanswered: 0,
	secondReaderWanted: true,
	maySend: false,
	mayRecall: false,
	mayReview: false,
	mayReopen: false
};
const decided = { decidedBy: reviewer, decidedAt: new Date('2026-12-02T09:00:00Z') };

function show(review: Partial<ReviewState>, given: { issuing?: boolean; mayWrite?: boolean } = {}): string {
	render(Standing, {
		report: { id: 'x' },
		review: { ...nothing, ...review },
		issuing: given.issuing ?? false,
		mayWrite: given.mayWrite ?? true,
		mayIssue: given.mayWrite ?? true
	});
	return document.body.textContent.replace(/\s+/g, ' ');
}

describe('Standing', () => {
	it('says of a draft whether somebody else has to read it', () => {
		expect(show({})).toContain('once somebody who did not write it has read and approved it');
	});

	it('says of a draft that may be issued alone what the report then says', () => {
		expect(show({ secondReaderWanted: false })).toContain('says that it was not independently reviewed');
	});

	it('names the reviewers of one in review, and lets the author take it back', () => {
		const text = show({ state: 'in-review', rounds: [round()], mayRecall: true });
		expect(text).toContain('In review with Colm Hadley since 1 December 2026.');
		expect(screen.getByRole('button', { name: 'Take it back' }).closest('form')?.getAttribute('action')).toBe(
			'/reports/x?/recall'
		);
	});

	it('puts the reasons of a return on top, with the count of remarks that wait', () => {
		const text = show({
			state: 'returned',
			unanswered: 2,
			rounds: [round({ ...decided, state: 'returned', statement: 'Albedo unsourced.' })]
		});
		expect(text).toContain('Colm Hadley returned it on 2 December 2026: Albedo unsourced.');
		expect(text).toContain('2 remarks wait for an answer');
	});

	it('says before an approval is thrown away what that costs', () => {
		const text = show({
			state: 'approved',
			rounds: [round({ ...decided, state: 'approved', statement: 'Recomputed.' })],
			approval: { holds: true, round: 1, by: reviewer, at: decided.decidedAt, independent: true },
			mayReopen: true
		});
		expect(text).toContain('Approved by Colm Hadley on 2 December 2026. Recomputed.');
		expect(text).toContain('The approval by Colm Hadley becomes void');
		expect(screen.getByRole('link', { name: 'Issue it' }).getAttribute('href')).toBe('/reports/x/issue');
	});

	it('says why an approval is void', () => {
		const text = show({
			state: 'draft',
			rounds: [round({ ...decided, state: 'void', voidReason: 'The addressee changed.' })],
			approval: { holds: false, round: 1, why: 'The addressee changed.' }
		});
		expect(text).toContain('The approval is void. The addressee changed. Send it for review again.');
	});

	it('offers a reader nothing to do', () => {
		show({ state: 'in-review', rounds: [round()] }, { mayWrite: false });
		expect(document.querySelector('form, button')).toBeNull();
	});
});
