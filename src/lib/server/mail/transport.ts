import { createTransport, type Transporter } from 'nodemailer';
import { env } from '../env';
import { log } from '../log';

export interface Mail {
	/** What the mail is about, by which two copies of it are known as one. */
	id?: string;
	to: { name: string; address: string };
	subject: string;
	text: string;
	html: string;
}

/** The mail server took the message on neither of two tries. */
export class MailNotSentError extends Error {
	constructor() {
		super('We could not send the mail. Please try again in a few minutes.');
		this.name = 'MailNotSentError';
	}
}

let transport: Transporter | undefined;

function opened(): Transporter {
	// No text of a mail may make the server read a file or fetch an address.
	transport ??= createTransport(env().SMTP_URL, {
		from: env().MAIL_FROM,
		disableFileAccess: true,
		disableUrlAccess: true
	});
	return transport;
}

/** Closes idle connections to the mail server; the next mail opens new ones. */
export function closeMail(): void {
	transport?.close();
	transport = undefined;
}

/** One line without control characters: nothing typed into a name can start a header of its own. */
function oneLine(text: string): string {
	return text
		.replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' ')
		.trim()
		.slice(0, 200);
}

/**
 * Sends a mail; call it after the transaction that it reports on is committed.
 * @throws MailNotSentError when the mail server refuses it twice; the cause is in the log
 */
export async function sendMail(mail: Mail): Promise<void> {
	const message = {
		to: { name: oneLine(mail.to.name), address: mail.to.address },
		subject: oneLine(mail.subject),
		text: mail.text,
		html: mail.html,
		...(mail.id === undefined ? {} : { messageId: `<${mail.id}@${new URL(env().ORIGIN).hostname}>` }),
		headers: { 'Auto-Submitted': 'auto-generated' }
	};
	for (const attempt of [1, 2]) {
		try {
			await opened().sendMail(message);
			return;
		} catch (cause) {
			log.error({ err: cause, attempt, subject: message.subject }, 'mail not sent');
		}
	}
	throw new MailNotSentError();
}

/**
 * Sends a mail beside the answer that is already under way. Never rejects: a failure is in the log.
 * @returns when the mail has left or been given up
 */
export async function sendBeside(mail: Mail): Promise<void> {
	await sendMail(mail).catch(() => undefined);
}
