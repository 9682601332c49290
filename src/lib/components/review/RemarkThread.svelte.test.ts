import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import RemarkThread from './RemarkThread.svelte';
import { author, remark, reviewer } from './testing';

describe('RemarkThread', () => {
	it('says who remarked what and who answered, in order, with the ways on named by the remark', () => {
		const answer = remark({ id: 'c2', body: 'The one of block A.', writtenBy: author });
		render(RemarkThread, { remark: remark({ answers: [answer] }), mayComment: true });
		const words = screen.getByRole('article', { name: 'Remark by Colm Hadley' }).textContent;
		expect(words.indexOf('Which sheet was measured?')).toBeLessThan(words.indexOf('The one of block A.'));
		expect(words).toContain('Ines Tarrow, 1\u00a0December\u00a02026');
		const link = screen.getByRole('link', { name: /^Answer.*Which sheet was measured/ });
		expect(link.getAttribute('href')).toBe('?answer=c1#form');
		const button = screen.getByRole('button', { name: 'Settled: “Which sheet was measured?”' });
		expect(button.closest('form')?.getAttribute('action')).toBe('?/settle');
	});

	it('folds a settled remark and offers to open it again', () => {
		render(RemarkThread, {
			remark: remark({ settledAt: new Date(), settledBy: reviewer }),
			mayComment: true
		});
		expect(document.querySelector('details')?.open).toBe(false);
		expect(screen.getByText(/^Settled by Colm Hadley/)).toBeTruthy();
		expect(screen.queryByRole('link')).toBeNull();
		expect(document.querySelector('form')?.getAttribute('action')).toBe('?/unsettle');
	});

	it('is read only for one who may not remark', () => {
		render(RemarkThread, { remark: remark(), mayComment: false });
		expect(document.querySelector('form, a, button')).toBeNull();
	});

	it('quotes the line as it read where that has changed since', () => {
		render(RemarkThread, {
			remark: remark({ lineChanged: true, quoted: 'Emissivity 0.85' }),
			mayComment: false
		});
		expect(screen.getByText(/it read: “Emissivity 0.85”/)).toBeTruthy();
	});
});
