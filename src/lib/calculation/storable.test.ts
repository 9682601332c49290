import { describe, expect, it } from 'vitest';
import { draftSchema } from './draft-schema';
import { newDraft } from './new-draft';
import { storable } from './storable';

describe('text that can be stored', () => {
	it('loses NUL characters and lone surrogates, and nothing else', () => {
		expect(storable('a\0b\ud800c\udc00')).toBe('abc');
		expect(storable('°C − 5 \u{1d6fc}\n\t“é”')).toBe('°C − 5 \u{1d6fc}\n\t“é”');
	});

	it('is what a draft is read as', () => {
		const draft = newDraft('find-value');
		const sent = { ...draft, evaluation: { ...draft.evaluation, seed: 'no\0on\ud83d' } };
		expect(draftSchema.parse(sent).evaluation.seed).toBe('noon');
	});
});
