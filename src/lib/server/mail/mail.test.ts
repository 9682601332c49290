import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { setTestEnvironment } from '../testing/environment';
import { openMailbox, type Mailbox } from '../testing/mailbox';
import { alreadyRegisteredMail, confirmationMail, passwordChangedMail, resetMail } from './templates';
import { closeMail, sendMail } from './transport';

let mailbox: Mailbox;

beforeAll(async () => {
	mailbox = await openMailbox();
	setTestEnvironment({ SMTP_URL: mailbox.url });
});
afterAll(async () => {
	closeMail();
	await mailbox.close();
});

const hostile = {
	name: 'Eve\r\nBcc: victim@evil.example\r\n\r\n<script>alert(1)</script>',
	email: 'eve@test.example'
};

describe('mails', () => {
	it('carry the link in both parts, from the configured origin', async () => {
		await sendMail(confirmationMail({ name: 'Rhea Aldous', email: 'rhea@test.example' }, 'abc', 24));
		const mail = mailbox.mails.at(-1);
		expect(mail?.text).toContain('https://noonmark.example/confirm/abc');
		expect(mail?.html).toContain('href="https://noonmark.example/confirm/abc"');
		expect(mail?.text).toContain('Hello Rhea Aldous,');
		expect(mail?.from?.text).toContain('Noonmark');
		expect(mail?.headers.get('auto-submitted')).toBe('auto-generated');
	});

	it('turn a name into no header and no markup', async () => {
		for (const compose of [
			() => confirmationMail(hostile, 'abc', 24),
			() => alreadyRegisteredMail(hostile),
			() => resetMail(hostile, 'abc', 1),
			() => passwordChangedMail(hostile)
		]) {
			await sendMail(compose());
			const mail = mailbox.mails.at(-1);
			expect(mail?.headers.has('bcc')).toBe(false);
			expect(mail?.bcc).toBeUndefined();
			expect(mail?.to).toMatchObject({ value: [{ address: 'eve@test.example' }] });
			expect(mail?.html).not.toContain('<script>');
			expect(mail?.html).toContain('&lt;script&gt;');
		}
	});
});
