import { Writable } from 'node:stream';
import { DrizzleQueryError } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { createLog } from './log';

function capture(): { lines: string[]; stream: Writable } {
	const lines: string[] = [];
	const stream = new Writable({
		write(chunk: Buffer, _encoding, done) {
			lines.push(chunk.toString());
			done();
		}
	});
	return { lines, stream };
}

describe('the log', () => {
	it('withholds secrets at the top and below, and keeps the rest', () => {
		const { lines, stream } = capture();
		const log = createLog(stream);
		log.level = 'info';
		log.info(
			{
				password: 'pw-one',
				user: { sessionToken: 'tok-two', name: 'Ada' },
				request: { headers: { cookie: 'c-three' } }
			},
			'signed in'
		);
		const text = lines.join('');
		expect(text).toContain('signed in');
		expect(text).toContain('Ada');
		for (const secret of ['pw-one', 'tok-two', 'c-three']) expect(text).not.toContain(secret);
	});

	it('writes an error with its message and stack', () => {
		const { lines, stream } = capture();
		const log = createLog(stream);
		log.level = 'info';
		log.error({ err: new Error('the roof is hot') }, 'failed');
		const entry = JSON.parse(lines[0] ?? '') as { err: { message: string; stack: string } };
		expect(entry.err.message).toBe('the roof is hot');
		expect(entry.err.stack).toContain('log.test');
	});

	it('tells which query failed and why, but not with which values', () => {
		const { lines, stream } = capture();
		const log = createLog(stream);
		log.level = 'info';
		const cause = new Error('connection refused');
		const failed = new DrizzleQueryError('select 1 where hash = $1', ['hash-four\nmore'], cause);
		log.error({ err: failed }, 'failed');
		log.error({ err: new Error('outer', { cause: failed }) }, 'failed');
		const text = lines.join('');
		expect(text).toContain('select 1 where hash');
		expect(text).toContain('connection refused');
		expect(text).not.toContain('hash-four');
		expect(text).not.toContain('more');
	});
});
