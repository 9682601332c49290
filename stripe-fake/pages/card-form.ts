import { cardNumbered, cards, type Card } from '../billing/cards';
import type { CardEntry } from '../billing/cards-on-file';
import { escapeHtml } from './layout';

export type Typed = { card: string; expiry: string; cvc: string; name: string; email: string };

const texts = (form: { [name: string]: unknown }, name: string): string => {
	const value = form[name];
	return typeof value === 'string' ? value.trim() : '';
};

export const typedIn = (form: { [name: string]: unknown }): Typed => ({
	card: texts(form, 'card'),
	expiry: texts(form, 'expiry'),
	cvc: texts(form, 'cvc'),
	name: texts(form, 'name'),
	email: texts(form, 'email')
});

/**
 * Reads what was typed.
 * @param now Unix seconds
 * @returns the card, or in plain words what is wrong
 */
export function readCard(typed: Typed, now: number): { card: Card; entry: CardEntry } | { fault: string } {
	const number = typed.card.replace(/[\s-]/g, '');
	if (number === '') return { fault: 'Type a card number.' };
	const card = cardNumbered(number);
	if (card === undefined)
		return { fault: 'This stand-in knows only the test cards listed below. Never type a real card in here.' };
	const expiry = /^(\d{1,2})\s*\/\s*(?:20)?(\d{2})$/.exec(typed.expiry);
	const expMonth = Number(expiry?.[1]);
	const expYear = 2000 + Number(expiry?.[2]);
	if (expiry === null || expMonth < 1 || expMonth > 12)
		return { fault: 'Type the expiry as month and year, like 12/34.' };
	if (Date.UTC(expYear, expMonth, 1) <= now * 1000) return { fault: 'Your card has expired.' };
	if (!/^\d{3,4}$/.test(typed.cvc)) return { fault: 'Type the security code: three digits.' };
	return {
		card,
		entry: {
			expMonth,
			expYear,
			name: typed.name === '' ? null : typed.name,
			email: typed.email === '' ? null : typed.email
		}
	};
}

const field = (name: keyof Typed, label: string, typed: Typed, more: string): string =>
	`<label>${label}<input name="${name}" value="${escapeHtml(typed[name])}" ${more}></label>`;

/** @param withEmail whether an address is asked for too */
export const cardFields = (typed: Typed, withEmail: boolean): string =>
	[
		withEmail ? field('email', 'E-mail', typed, 'type="email" autocomplete="off"') : '',
		field('card', 'Card number', typed, 'inputmode="numeric" autocomplete="off"'),
		field('expiry', 'Expiry (MM/YY)', typed, 'inputmode="numeric" autocomplete="off"'),
		field('cvc', 'Security code', typed, 'inputmode="numeric" autocomplete="off"'),
		field('name', 'Name on the card', typed, 'autocomplete="off"')
	].join('\n');

/** Numbers to try, and what comes of each. */
export const cardTable = (): string => `<h2>Test cards</h2>
<p>Any later expiry and any three digits go with them.</p>
<div class="wide"><table><thead><tr><th>Number</th><th>What happens</th></tr></thead><tbody>
${cards
	.map(
		({ number, outcome }) =>
			`<tr><td><code>${number.replace(/(\d{4})(?=\d)/g, '$1 ')}</code></td><td>${escapeHtml(outcome)}</td></tr>`
	)
	.join('\n')}
</tbody></table></div>`;
