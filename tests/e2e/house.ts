import { expect, type APIRequestContext } from '@playwright/test';

export interface SignIn {
	name: string;
	email: string;
	password: string;
	organisation: string;
	roles: string[];
}

function told(name: string): string {
	const value = process.env[name];
	if (value === undefined)
		throw new Error(`${name} is not set; run the browser tests by npm test -- browser`);
	return value;
}

/** The demo's people; the first two founded an organisation each. */
export const signIns = JSON.parse(told('E2E_SIGN_INS')) as SignIn[];

export interface Mail {
	id: string;
	at: string;
	from: string;
	to: string[];
	subject: string;
	text: string;
	links: string[];
}

/** Waits for the newest mail to an address. */
export async function mailTo(request: APIRequestContext, address: string, subject?: RegExp): Promise<Mail> {
	let found: Mail | undefined;
	await expect(async () => {
		const response = await request.get(new URL('messages', told('E2E_MAIL_READER')).href, {
			params: { to: address }
		});
		const mails = (await response.json()) as Mail[];
		found = mails.find((mail) => subject === undefined || subject.test(mail.subject));
		expect(found, `mail to ${address}`).toBeDefined();
	}).toPass({ timeout: 15_000 });
	return found as Mail;
}
