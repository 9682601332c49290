import { createServer } from 'node:http';
import { mkdirSync, readdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { randomBytes } from 'node:crypto';
import { join } from 'node:path';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

/*
 * Takes every message that the service sends and delivers none: a mail server for development and tests. Messages are
 * kept in a folder and read on a plain page, or as JSON:
 *   GET /                      the newest messages
 *   GET /messages?to=ADDRESS   [{ id, at, from, to, subject, text, links }], newest first
 *   GET /messages/ID           one of them
 * Environment: SMTP_PORT, MAIL_READER_PORT, MAIL_FOLDER.
 */

/** @typedef {{ id: string, at: string, from: string, to: string[], subject: string, text: string, links: string[] }} Message */

/** @param {string} name */
function needed(name) {
	const value = process.env[name];
	if (value === undefined || value === '') throw new Error(`${name} is not set`);
	return value;
}

const folder = needed('MAIL_FOLDER');
const kept = 500;
mkdirSync(folder, { recursive: true, mode: 0o700 });

/** @returns {string[]} ids, newest first: an id begins with its time */
const ids = () =>
	readdirSync(folder)
		.filter((name) => name.endsWith('.json'))
		.map((name) => name.slice(0, -'.json'.length))
		.sort()
		.reverse();

/** @param {string} id @returns {Message} */
const read = (id) => JSON.parse(readFileSync(join(folder, `${id}.json`), 'utf8'));

/**
 * @param {import('mailparser').ParsedMail} mail
 * @param {string[]} recipients of the envelope
 */
function keep(mail, recipients) {
	const at = new Date().toISOString();
	const id = `${at.replace(/\D/g, '')}-${randomBytes(4).toString('hex')}`;
	const text = mail.text ?? '';
	/** @type {Message} */
	const message = {
		id,
		at,
		from: mail.from?.text ?? '',
		to: recipients,
		subject: mail.subject ?? '',
		text,
		links: text.match(/https?:\/\/[^\s<>"')\]]+/g) ?? []
	};
	const draft = join(folder, `${id}.new`);
	writeFileSync(draft, JSON.stringify(message, null, '\t'), { mode: 0o600 });
	renameSync(draft, join(folder, `${id}.json`));
}

const smtp = new SMTPServer({
	authOptional: true,
	disabledCommands: ['STARTTLS', 'AUTH'],
	size: 30 * 1024 * 1024,
	logger: false,
	onData(stream, session, done) {
		simpleParser(stream).then(
			(mail) => {
				keep(
					mail,
					session.envelope.rcptTo.map(({ address }) => address)
				);
				done();
			},
			(error) => done(error)
		);
	}
});
smtp.on('error', (error) => {
	console.error(error);
	process.exit(1);
});

/** @param {string} text */
const escape = (text) => text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);

/** @param {Message} message */
const asArticle = (message) => `<article>
<h2>${escape(message.subject)}</h2>
<p>${escape(message.at)} · to ${escape(message.to.join(', '))} · from ${escape(message.from)}</p>
<pre>${escape(message.text).replace(/https?:\/\/(?:&#38;|[^\s<>&#])+/g, (link) => `<a href="${link}">${link}</a>`)}</pre>
</article>`;

/** @param {Message[]} messages */
const asPage = (messages) => `<!doctype html>
<html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>Local mail</title>
<style>body{font:16px/1.5 sans-serif;max-width:44rem;margin:2rem auto;padding:0 1rem}pre{white-space:pre-wrap}
article{border-top:1px solid #999}h2{font-size:1.1rem}</style>
<h1>Local mail</h1>
<p>Messages that this copy of Noonmark has sent, newest first. None of them left this machine.</p>
${messages.length === 0 ? '<p>No message yet. Reload after something was sent.</p>' : messages.map(asArticle).join('\n')}
</html>`;

const reader = createServer((request, response) => {
	/** @param {number} status @param {string} type @param {string} body */
	const answer = (status, type, body) => {
		response.writeHead(status, {
			'content-type': `${type}; charset=utf-8`,
			'cache-control': 'no-store',
			'x-content-type-options': 'nosniff',
			'content-security-policy': "default-src 'none'; style-src 'unsafe-inline'"
		});
		response.end(body);
	};
	const url = new URL(request.url ?? '/', 'http://127.0.0.1');
	const to = url.searchParams.get('to')?.toLowerCase();
	const chosen = () =>
		ids()
			.slice(0, kept)
			.map(read)
			.filter((message) => to === undefined || message.to.some((address) => address.toLowerCase() === to));
	const one = /^\/messages\/([\w-]+)$/.exec(url.pathname)?.[1];
	if (request.method !== 'GET') answer(405, 'text/plain', 'Only reading is possible here.');
	else if (url.pathname === '/') answer(200, 'text/html', asPage(chosen().slice(0, 50)));
	else if (url.pathname === '/messages') answer(200, 'application/json', JSON.stringify(chosen()));
	else if (one !== undefined && ids().includes(one))
		answer(200, 'application/json', JSON.stringify(read(one)));
	else answer(404, 'text/plain', 'There is no such message.');
});

smtp.listen(Number(needed('SMTP_PORT')), '127.0.0.1');
reader.listen(Number(needed('MAIL_READER_PORT')), '127.0.0.1');

for (const signal of /** @type {const} */ (['SIGTERM', 'SIGINT'])) {
	process.on(signal, () => {
		reader.close();
		reader.closeAllConnections();
		smtp.close(() => process.exit(0));
	});
}
