import { Agent, request, type IncomingHttpHeaders } from 'node:http';

/* Requests as a browser or a program would send them, every header in our hands and no redirect followed. */

export interface Sent {
	method: string;
	path: string;
	headers: Record<string, string>;
	body?: Buffer | undefined;
}

export interface Answer {
	status: number;
	headers: IncomingHttpHeaders;
	body: Buffer;
}

const agent = new Agent({ keepAlive: true, maxSockets: 32 });

/** @param from address of this machine to send from */
export function send(address: string, sent: Sent, from: string): Promise<Answer> {
	const { method, path, headers, body } = sent;
	return new Promise((resolve, reject) => {
		const asked = request(
			new URL(address + path),
			{
				method,
				agent,
				localAddress: from,
				headers: { ...headers, ...(body && { 'content-length': String(body.length) }) }
			},
			(response) => {
				const parts: Buffer[] = [];
				response.on('data', (part: Buffer) => parts.push(part));
				response.on('error', reject);
				response.on('end', () =>
					resolve({
						status: response.statusCode ?? 0,
						headers: response.headers,
						body: Buffer.concat(parts)
					})
				);
			}
		);
		asked.setTimeout(60_000, () =>
			asked.destroy(new Error(`${method} ${path} was not answered in a minute.`))
		);
		asked.on('error', (fault: NodeJS.ErrnoException) => {
			// The server closed a connection that was kept, just as it was used again: nothing of this was read.
			if (asked.reusedSocket && fault.code === 'ECONNRESET') resolve(send(address, sent, from));
			else reject(fault);
		});
		asked.end(body);
	});
}

export function closeConnections(): void {
	agent.destroy();
}

/** Does work on each of a list, at most `width` at a time. */
export async function inParallel<T>(
	all: readonly T[],
	width: number,
	work: (one: T) => Promise<void>
): Promise<void> {
	const waiting = all.values();
	await Promise.all(
		Array.from({ length: width }, async () => {
			for (const one of waiting) await work(one);
		})
	);
}
