import { withReturn } from '../../with-return';
import { compose, linkTo, type Recipient } from './compose';
import type { Mail } from './transport';

const notYou = 'If this was not you, do nothing: without the link nothing happens.';

/** @param returnTo path to go on with once the address is confirmed; empty for none */
export function confirmationMail(to: Recipient, token: string, hours: number, returnTo = ''): Mail {
	return compose(
		to,
		'Confirm your address for Noonmark',
		[
			'Somebody, most likely you, signed up to Noonmark with this address. Follow this link to confirm it:',
			`The link works once and for ${hours} hours. You will be asked for the password that you chose.`,
			notYou
		],
		{ label: 'Confirm this address', href: linkTo(withReturn(`/confirm/${token}`, returnTo)) }
	);
}

export function alreadyRegisteredMail(to: Recipient, returnTo = ''): Mail {
	return compose(
		to,
		'You already have a Noonmark account',
		[
			'Somebody, most likely you, tried to sign up to Noonmark with this address, which already has an account. You can sign in here:',
			`If you do not know your password any more, choose a new one: ${linkTo('/reset')}`,
			'If this was not you, do nothing: your account is as it was.'
		],
		{ label: 'Sign in', href: linkTo(withReturn('/sign-in', returnTo)) }
	);
}

export function resetMail(to: Recipient, token: string, hours: number): Mail {
	return compose(
		to,
		'Choose a new password for Noonmark',
		[
			'Somebody, most likely you, asked for a new password for your Noonmark account. Choose one here:',
			`The link works once and for ${hours === 1 ? 'one hour' : `${hours} hours`}. A new password signs you out everywhere.`,
			notYou
		],
		{ label: 'Choose a new password', href: linkTo(`/reset/${token}`) }
	);
}

export function passwordChangedMail(to: Recipient): Mail {
	return compose(
		to,
		'Your Noonmark password was changed',
		[
			'The password of your Noonmark account was changed just now. If that was you, nothing is left to do. If not, choose a new one at once:'
		],
		{ label: 'Choose a new password', href: linkTo('/reset') }
	);
}
