import { createServer } from 'node:http';

const port = Number(process.env.STRIPE_FAKE_PORT);
const server = createServer((request, response) => {
	const ready = request.url === '/_control/ready';
	response.writeHead(ready ? 200 : 404, { 'content-type': 'application/json' });
	response.end(
		ready ? '{}' : JSON.stringify({ error: { type: 'invalid_request_error', message: 'Not found.' } })
	);
});
server.listen(port, '127.0.0.1');
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
	process.on(signal, () => {
		server.closeAllConnections();
		server.close(() => process.exit(0));
	});
}
