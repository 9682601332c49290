import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { runDue } from './billing/cycle';
import { Control } from './control/control';
import { Failures } from './control/failures';
import { answerControl } from './control/http';
import { emptyState } from './core/state';
import { readState, writeState } from './core/state-file';
import { World } from './core/world';
import { Deliverer, type Webhook } from './events/deliver';
import type { HttpAnswer, HttpRequest } from './http/answer';
import { Api } from './http/api';
import { httpServer } from './http/server';
import { answerPage } from './pages/index';

export type StartOptions = {
	/** Any free one unless given. */
	port?: number;
	/** JSON file that keeps everything from one start to the next; in memory only unless given. */
	file?: string;
	/** The secret key that it accepts. */
	key: string;
	/** Where events go; without it they are only recorded. */
	webhook?: Webhook;
};

export type StripeFake = {
	port: number;
	/** `http://127.0.0.1:port` */
	address: string;
	control: Control;
	stop: () => Promise<void>;
};

const savedAfter = 50;

/** Starts the stand-in on the loopback address; several may run side by side. */
export async function startStripeFake(options: StartOptions): Promise<StripeFake> {
	const failures = new Failures();
	const world = new World(emptyState(''), options.webhook !== undefined, (event) => deliverer.add(event));
	let saving: NodeJS.Timeout | undefined;
	const saveNow = () => {
		clearTimeout(saving);
		saving = undefined;
		if (options.file !== undefined) writeState(options.file, world.state);
	};
	const save = () => {
		if (options.file !== undefined) saving ??= setTimeout(saveNow, savedAfter);
	};
	const deliverer = new Deliverer(() => world.state, options.webhook, save);
	const api = new Api(world, options.key, failures);
	const control = new Control(world, deliverer, failures, api.requests, save);

	const answer = async (request: HttpRequest): Promise<HttpAnswer> => {
		if (request.path.startsWith('/_control/')) return await answerControl(control, request);
		if (request.path.startsWith('/v1/') || request.path.startsWith('/v2/')) return await api.answer(request);
		return answerPage(world, request);
	};
	const afterAnswer = () => {
		save();
		deliverer.flush();
	};
	const server = httpServer(answer, afterAnswer);
	server.listen(options.port ?? 0, '127.0.0.1');
	await once(server, 'listening');
	const { port } = server.address() as AddressInfo;
	const address = `http://127.0.0.1:${port}`;
	world.state = readState(options.file, address);
	world.state.base = address;
	deliverer.resume();
	const clock = setInterval(() => {
		if (runDue(world) > 0) afterAnswer();
	}, 1000);
	clock.unref();

	return {
		port,
		address,
		control,
		stop: async () => {
			clearInterval(clock);
			deliverer.stop();
			const closed = new Promise<void>((resolve) => server.close(() => resolve()));
			server.closeAllConnections();
			await closed;
			saveNow();
		}
	};
}
