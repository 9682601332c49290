import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { createTransport } from 'nodemailer';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { takeLock } from '../../scripts/lib/lock.mjs';
import { freePort, isFree, webPort } from '../../scripts/lib/ports.mjs';

let folder: string;
const children: ChildProcess[] = [];

beforeAll(async () => {
	folder = await mkdtemp(join(tmpdir(), 'noonmark-house-'));
});
afterEach(() => {
	for (const child of children.splice(0)) child.kill('SIGKILL');
});
afterAll(async () => {
	await rm(folder, { recursive: true });
});

function node(args: string[], env: NodeJS.ProcessEnv = {}): ChildProcess {
	const child = spawn(process.execPath, args, {
		env: { ...process.env, ...env },
		stdio: ['pipe', 'pipe', 'inherit']
	});
	children.push(child);
	return child;
}

async function until(condition: () => boolean | Promise<boolean>): Promise<void> {
	const deadline = Date.now() + 20_000;
	while (!(await condition())) {
		if (Date.now() > deadline) throw new Error('It did not happen in time.');
		await sleep(50);
	}
}

describe('the lock of a checkout', () => {
	it('is held by one, told to the other, and given back', () => {
		const file = join(folder, 'a.lock');
		const first = takeLock(file);
		if (!first.held) throw new Error('A new lock was refused.');
		first.note('http://127.0.0.1:3000');
		const second = takeLock(file);
		expect(second).toMatchObject({
			held: false,
			holder: { processId: process.pid, note: 'http://127.0.0.1:3000' }
		});
		first.release();
		expect(takeLock(file).held).toBe(true);
	});

	it('is taken over from a process that is gone, even if its number is in use again', async () => {
		const file = join(folder, 'b.lock');
		await writeFile(file, JSON.stringify({ processId: process.pid, beginning: '1', note: '' }));
		expect(takeLock(file).held).toBe(true);
	});
});

describe('ports', () => {
	it('refuses a given port that is taken or none at all, in words', async () => {
		const held = await webPort(String(await freePort()));
		expect(await isFree(held.port)).toBe(false);
		await expect(webPort(String(held.port))).rejects.toThrow(`Port ${held.port} (PORT) is taken.`);
		await held.release();
		expect(await isFree(held.port)).toBe(true);
		await expect(webPort('80a')).rejects.toThrow('is not a port');
	});

	it('gives two copies that start together different ports', async () => {
		const [one, other] = await Promise.all([webPort(undefined), webPort(undefined)]);
		expect(one?.port).not.toBe(other?.port);
		await Promise.all([one?.release(), other?.release()]);
	});
});

describe('a part of the service', () => {
	it('ends when whoever started it was killed', async () => {
		const program = join(folder, 'part.mjs');
		await writeFile(
			program,
			'setInterval(() => undefined, 1000); process.stdout.write(`${process.pid}\\n`);'
		);
		const parent = join(folder, 'parent.mjs');
		await writeFile(
			parent,
			`import { spawn } from 'node:child_process';
			spawn(process.execPath, ['--import', ${JSON.stringify(`file://${process.cwd()}/scripts/lib/follow-parent.mjs`)}, ${JSON.stringify(program)}],
				{ detached: true, stdio: ['pipe', 'inherit', 'inherit'] });`
		);
		const starter = node([parent]);
		const [line] = (await once(starter.stdout as NodeJS.ReadableStream, 'data')) as [Buffer];
		const part = Number(line.toString());
		const alive = () => {
			try {
				process.kill(part, 0);
				return true;
			} catch {
				return false;
			}
		};
		expect(alive()).toBe(true);
		starter.kill('SIGKILL');
		await until(() => !alive());
	});
});

describe('the mail sink', () => {
	it('keeps what is sent and shows it to whoever asks for the address', async () => {
		const [smtp, reader] = [await freePort(), await freePort()];
		node(['scripts/smtp-sink.mjs'], {
			SMTP_PORT: String(smtp),
			MAIL_READER_PORT: String(reader),
			MAIL_FOLDER: join(folder, 'mail')
		});
		const address = `http://127.0.0.1:${reader}`;
		await until(async () => (await fetch(address).catch(() => undefined))?.status === 200);
		const transport = createTransport(`smtp://127.0.0.1:${smtp}`);
		const link = 'http://127.0.0.1:3000/confirm?token=abc&step=2';
		const mail = { from: 'post@noonmark.example', subject: 'Confirm <now>', text: `Follow ${link} today.` };
		await transport.sendMail({ ...mail, to: 'Ada@one.example' });
		await transport.sendMail({ ...mail, to: 'bo@two.example', subject: 'Later' });

		const all = (await (await fetch(`${address}/messages`)).json()) as { id: string; subject: string }[];
		expect(all.map(({ subject }) => subject)).toEqual(['Later', 'Confirm <now>']);
		const [hers, ...others] = (await (await fetch(`${address}/messages?to=ada@ONE.example`)).json()) as {
			id: string;
			links: string[];
		}[];
		expect(others).toEqual([]);
		expect(hers?.links).toEqual([link]);
		const single = await fetch(`${address}/messages/${hers?.id}`);
		expect(await single.json()).toEqual(hers);
		expect((await fetch(`${address}/messages/..%2f..%2fpackage`)).status).toBe(404);
		const page = await (await fetch(address)).text();
		expect(page).toContain('Confirm &#60;now&#62;');
		expect(page).not.toContain('<now>');
	});
});
