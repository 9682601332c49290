import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { emptyState, type ById, type State } from './state';

const day = 24 * 3600 * 1000;

/** @param file undefined for a state that ends with the process @param base this start's own address */
export function readState(file: string | undefined, base: string): State {
	if (file === undefined) return emptyState(base);
	let text: string;
	try {
		text = readFileSync(file, 'utf8');
	} catch (error) {
		if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return emptyState(base);
		throw error;
	}
	const before = (JSON.parse(text) as State).base;
	const kept = JSON.parse(text.replaceAll(`"${before}`, `"${base}`)) as State;
	return { ...emptyState(base), ...kept, objects: { ...emptyState(base).objects, ...kept.objects } };
}

const keepOnly = <T>(byId: ById<T>, wanted: (each: T) => boolean): ById<T> =>
	Object.fromEntries(Object.entries(byId).filter(([, each]) => wanted(each)));

/** Answers are kept for a day and events for thirty. */
function forgetOld(state: State): void {
	const now = Date.now();
	state.keptAnswers = keepOnly(state.keptAnswers, ({ at }) => at >= now - day);
	state.objects.events = keepOnly(state.objects.events, ({ created }) => created * 1000 >= now - 30 * day);
	state.deliveries = keepOnly(state.deliveries, ({ event }) => state.objects.events[event] !== undefined);
}

/** Writes the whole state so that a reader finds the old or the new one, never a part. */
export function writeState(file: string, state: State): void {
	forgetOld(state);
	mkdirSync(dirname(file), { recursive: true });
	const draft = `${file}.${process.pid}.new`;
	writeFileSync(draft, JSON.stringify(state), { mode: 0o600 });
	renameSync(draft, file);
}
