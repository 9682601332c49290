import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { HttpAnswer, HttpRequest } from './answer';

const largest = 1024 * 1024;

async function read(request: IncomingMessage): Promise<HttpRequest> {
	const chunks: Buffer[] = [];
	let size = 0;
	for await (const chunk of request as AsyncIterable<Buffer>) {
		size += chunk.length;
		if (size > largest) throw new Error('The request is too large.');
		chunks.push(chunk);
	}
	const url = new URL(request.url ?? '/', 'http://127.0.0.1');
	return {
		method: request.method ?? 'GET',
		path: url.pathname,
		query: url.search.slice(1),
		headers: Object.fromEntries(
			Object.entries(request.headers).map(([name, value]) => [
				name,
				Array.isArray(value) ? value.join(', ') : value
			])
		),
		body: Buffer.concat(chunks).toString('utf8')
	};
}

function send(response: ServerResponse, { status, headers, body, reset }: HttpAnswer): void {
	if (reset === true) {
		response.socket?.resetAndDestroy();
		return;
	}
	const bytes = typeof body === 'string' ? Buffer.from(body) : body;
	response.writeHead(status, { ...headers, 'content-length': bytes.length });
	response.end(bytes);
}

/** @param onSent called once an answer is out */
export function httpServer(
	answer: (request: HttpRequest) => Promise<HttpAnswer>,
	onSent: () => void
): Server {
	// A client that sends its next request just when an idle connection is closed would see it cut.
	return createServer({ keepAliveTimeout: 75_000 }, (request, response) => {
		response.on('close', onSent);
		read(request)
			.then(answer)
			.then(
				(answered) => send(response, answered),
				(error: unknown) => {
					console.error(error);
					send(response, { status: 500, headers: { 'content-type': 'text/plain' }, body: 'It failed.' });
				}
			);
	});
}
