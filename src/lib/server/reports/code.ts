import { randomInt } from 'node:crypto';

/** No letter or digit that is mistaken for another when read aloud or off paper. */
const alphabet = '23456789ABCDEFGHJKMNPQRSTVWXYZ';

/** A verification code such as 8KQ2-7MTR: 30^8 of them, drawn at random, so that none can be guessed from another. */
export function newCode(): string {
	const characters = Array.from({ length: 8 }, () => alphabet[randomInt(alphabet.length)]);
	return `${characters.slice(0, 4).join('')}-${characters.slice(4).join('')}`;
}
