import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';

/** A mail server in this process that keeps what it receives. */
export interface Mailbox {
	url: string;
	mails: ParsedMail[];
	/** Refuses the next `count` messages. */
	refuse: (count: number) => void;
	/** How often a message was refused. */
	refused: () => number;
	close: () => Promise<void>;
}

export async function openMailbox(): Promise<Mailbox> {
	const mails: ParsedMail[] = [];
	let toRefuse = 0;
	let refusals = 0;
	const server = new SMTPServer({
		disabledCommands: ['AUTH', 'STARTTLS'],
		logger: false,
		onData: (stream, _session, done) => {
			simpleParser(stream).then((mail) => {
				if (toRefuse > 0) {
					toRefuse--;
					refusals++;
					done(new Error('Refused for the test.'));
					return;
				}
				mails.push(mail);
				done();
			}, done);
		}
	});
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const address = server.server.address();
	if (address === null || typeof address === 'string') throw new Error('The mail server has no port.');
	return {
		url: `smtp://127.0.0.1:${address.port}`,
		mails,
		refuse: (count) => {
			toRefuse = count;
		},
		refused: () => refusals,
		close: () => new Promise((resolve) => server.close(() => resolve()))
	};
}
