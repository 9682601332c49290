import { commonWords } from './common-words';

/*
 * What a password must be: long, and not made of what anybody would try first. No composition rules.
 * (NIST SP 800-63B-4, 3.1.1.2: at least 15 characters as the only factor, a blocklist, no other rules.)
 */

export const shortest = 15;
export const longest = 256;
/** As many characters must be left once everything that is easily guessed has been taken out. */
const ownCharacters = 6;

const rows = [
	'abcdefghijklmnopqrstuvwxyz',
	'01234567890',
	'qwertyuiop',
	'qwertzuiop',
	'azertyuiop',
	'asdfghjkl',
	'yxcvbnm',
	'zxcvbnm',
	'1q2w3e4r5t6z7u8i9o0p',
	'1q2w3e4r5t6y7u8i9o0p',
	'1qaz2wsx3edc4rfv5tgb6yhn7ujm8ik'
];
const sequences = rows.flatMap((row) => [row, [...row].reverse().join('')]);

/** Letters and digits only, lower case, with the usual letter look-alikes undone. */
function plain(text: string): string {
	const alike: Record<string, string> = { '@': 'a', $: 's', '!': 'i' };
	return [...text.normalize('NFKD').toLowerCase()]
		.map((character) => alike[character] ?? character)
		.join('')
		.replace(/[^\p{L}\p{N}]/gu, '');
}

/** Takes out runs of four and more that stand in a row of the alphabet or keyboard. */
function withoutSequences(text: string): string {
	let left = text;
	for (let start = 0; start < left.length; start++) {
		let run = 0;
		for (const row of sequences) {
			let length = 4;
			while (start + length <= left.length && row.includes(left.slice(start, start + length))) {
				run = Math.max(run, length);
				length++;
			}
		}
		if (run > 0) {
			left = left.slice(0, start) + left.slice(start + run);
			start = Math.max(-1, start - 4);
		}
	}
	return left;
}

/** Whether the text is one short piece over and over, the last time perhaps cut off. */
function repeats(text: string): boolean {
	for (let period = 1; period <= 12 && 2 * period <= text.length; period++) {
		if (text.slice(period) === text.slice(0, -period)) return true;
	}
	return false;
}

interface Own {
	name: string;
	email: string;
}

/** The person's own words: parts of the name and of the address, of three letters and more. */
function ownWords(own: Own): string[] {
	return `${own.name} ${own.email}`
		.split(/[^\p{L}\p{N}]+/u)
		.map(plain)
		.filter((word) => word.length >= 3);
}

/**
 * Why a new password is refused, in words that say what to do; null when it is good.
 * @param own name and address of the person, which anybody who knows them would try
 */
export function refuseNewPassword(password: string, own: Own): string | null {
	const length = [...password.normalize('NFC')].length;
	if (length < shortest) {
		return `Use at least ${shortest} characters; this has ${length}. A few unrelated words work well.`;
	}
	if (length > longest) return `Use at most ${longest} characters.`;
	const text = plain(password);
	if (repeats(password.toLowerCase()) || (text !== '' && repeats(text))) {
		return 'This repeats the same few characters. Use words that do not repeat.';
	}
	let left = text;
	const found: string[] = [];
	const product = ['noonmark', 'noon', 'mark'];
	for (const [words, reason] of [
		[ownWords(own), 'your own name or address'],
		[product, 'the name of this service'],
		[commonWords, 'words that are tried first']
	] as const) {
		for (const word of [...words].sort((a, b) => b.length - a.length)) {
			if (!left.includes(word)) continue;
			left = left.replaceAll(word, '');
			if (!found.includes(reason)) found.push(reason);
		}
	}
	const bare = withoutSequences(left).replace(/(.)\1{2,}/gu, '');
	if (bare.length < left.length) found.push('keys in a row');
	// Signs between words count as little as the words; a password of signs only is judged by the signs.
	const rest = text === '' ? length : [...bare].length;
	if (found.length > 0 && rest < ownCharacters) {
		return `This is mostly ${found.join(' and ')}. Add words that nobody would guess.`;
	}
	return null;
}
