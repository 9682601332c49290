import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { refuseNewPassword } from './password-rules';

const own = { name: 'Rhea Aldous', email: 'rhea.aldous@tallisbrook.example' };

describe('refuseNewPassword', () => {
	it.each([
		['14 characters', 'umbrella kettl', /at least 15 characters; this has 14/],
		['a common word twice', 'passwordpassword', /repeats/],
		['a unit over and over, cut off', 'xk3xk3xk3xk3xk3x', /repeats/],
		['one character', 'zzzzzzzzzzzzzzzzzz', /repeats/],
		['one sign', '!!!!!!!!!!!!!!!!!!', /repeats/],
		['a row of digits', '123456789012345', /repeats|keys in a row/],
		['keyboard rows', 'qwertyuiopasdfghjkl', /keys in a row/],
		['a row backwards', 'poiuytrewqlkjhgfdsa', /keys in a row/],
		['a common word with a row of digits', 'Password123456789', /tried first and keys in a row/],
		['look-alike signs', 'P@$$word12345678', /tried first/],
		['common words in a row', 'monkey-dragon-football', /tried first/],
		['the well-known example', 'correct horse battery staple', /tried first/],
		['the product', 'noonmark-noonmark2', /name of this service/],
		['the own name', 'RheaAldous-2026', /your own name or address/],
		['the own address', 'rhea.aldous@tallisbrook.example', /your own name or address/]
	])('refuses %s with the reason', (_what, password, reason) => {
		expect(refuseNewPassword(password, own)).toMatch(reason);
	});

	it.each([
		['words', 'umbrella kettle voyage'],
		['one common word among others', 'summer umbrella kettle voyage'],
		['64 spaces and letters of several scripts', `${' '.repeat(30)}крючок 水面 łódź ${' '.repeat(18)}9`],
		['signs', '=)?/&%(}]{[#*+~;_'],
		[
			'256 characters',
			'kümmel-zapfen-ring/'.concat('r8Tq0vLx2mWz5nKe7pJb1yGd4hCs9uFa3oXi6tRk'.repeat(6)).slice(0, 256)
		]
	])('takes %s', (_what, password) => {
		expect(refuseNewPassword(password, own)).toBeNull();
	});

	it('refuses 257 characters', () => {
		const long = Array.from(
			{ length: 257 },
			(_, i) => 'r8Tq0vLx2mWz5nKe7pJb1yGd4'[(i * 7 + (i >> 3)) % 25]
		).join('');
		expect(refuseNewPassword(long, own)).toMatch(/at most 256/);
	});

	it('answers any text, in bounded time', () => {
		fc.assert(
			fc.property(fc.string({ maxLength: 300, unit: 'grapheme' }), (password) => {
				const answer = refuseNewPassword(password, own);
				if ([...password.normalize('NFC')].length < 15) expect(answer).toMatch(/at least 15/);
				else expect(answer === null || answer.length > 20).toBe(true);
			})
		);
	});
});
