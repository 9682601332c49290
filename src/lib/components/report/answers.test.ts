import { describe, expect, it } from 'vitest';
import { answerField, answersIn, typedAnswers } from './answers';

describe('answers in the report’s own form', () => {
	it('are taken by the remark that they answer; empty ones and other fields are none', () => {
		const form = new FormData();
		form.set('answer', 'The report’s own answer');
		form.set(answerField('1'), 'First line\r\nsecond');
		form.set(answerField('2'), '  ');
		expect(answersIn(form)).toEqual([{ commentId: '1', body: 'First line\nsecond' }]);
	});

	it('come back as typed after a fault', () => {
		expect(typedAnswers({ title: 'T', answer: 'A', [answerField('1')]: 'typed' })).toEqual({ '1': 'typed' });
		expect(typedAnswers(undefined)).toEqual({});
	});
});
