import type { CalculationDraft } from '$lib/calculation/draft';

export type SaveStatus = 'saved' | 'unsaved' | 'saving' | 'conflict' | 'failed';

/** Quiet time after typing before a draft is saved. */
const quietMilliseconds = 900;

/**
 * The form's draft in the browser: everything typed, saved a moment after typing stops. A save that fails is tried
 * again; one that meets a newer version stops and says so, and keeps what was typed.
 */
export class DraftStore {
	draft = $state<CalculationDraft>() as CalculationDraft;
	version = $state(0);
	status = $state<SaveStatus>('saved');
	/** What the server said about a save that it refused. */
	message = $state('');
	readonly id: string;
	#saved = '';
	#timer: ReturnType<typeof setTimeout> | undefined;
	#running: Promise<void> | undefined;

	constructor(id: string, draft: CalculationDraft, version: number) {
		this.id = id;
		this.draft = draft;
		this.version = version;
		this.#saved = JSON.stringify(draft);
	}

	/** The draft as JSON; reading it in an effect follows every change. */
	get json(): string {
		return JSON.stringify($state.snapshot(this.draft));
	}

	/** What the server holds now, after a submitted form. */
	adopt(draft: CalculationDraft, version: number): void {
		clearTimeout(this.#timer);
		this.draft = draft;
		this.version = version;
		this.#saved = JSON.stringify(draft);
		this.status = 'saved';
		this.message = '';
	}

	/** The server holds a newer version: nothing is saved any more until the page is loaded anew. */
	refuse(message: string): void {
		clearTimeout(this.#timer);
		this.status = 'conflict';
		this.message = message;
	}

	/** A form's own submit saves everything: no autosave may run beside it. */
	hold(): Promise<void> {
		clearTimeout(this.#timer);
		return this.#running ?? Promise.resolve();
	}

	/** Call after a change; saves once typing has stopped. */
	changed(json: string): void {
		if (json === this.#saved || this.status === 'conflict') return;
		this.status = 'unsaved';
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => void this.save(), quietMilliseconds);
	}

	save(): Promise<void> {
		clearTimeout(this.#timer);
		this.#running = (this.#running ?? Promise.resolve()).then(() => this.#send());
		return this.#running;
	}

	async #send(): Promise<void> {
		const json = this.json;
		if (json === this.#saved) return;
		this.status = 'saving';
		try {
			const response = await fetch(`/api/calculations/${this.id}/draft`, {
				method: 'PUT',
				headers: { 'content-type': 'application/json', accept: 'application/json' },
				body: JSON.stringify({ draft: JSON.parse(json) as unknown, baseVersion: this.version })
			});
			if (response.ok) {
				const saved = (await response.json()) as { version: number };
				this.version = saved.version;
				this.#saved = json;
				this.message = '';
				this.status = this.json === json ? 'saved' : 'unsaved';
				if (this.status === 'unsaved') this.changed(this.json);
				return;
			}
			const problem = (await response.json().catch(() => undefined)) as { message?: string } | undefined;
			this.status = response.status === 409 ? 'conflict' : 'failed';
			this.message =
				response.status === 401
					? 'You have been signed out. Sign in again in another tab; what you typed stays here and is then saved.'
					: (problem?.message ?? `The server answered ${response.status}.`);
		} catch {
			this.status = 'failed';
			this.message = 'The server cannot be reached. What you typed stays here and is saved when it can be.';
		}
		if (this.status === 'failed') {
			clearTimeout(this.#timer);
			this.#timer = setTimeout(() => void this.save(), 5000);
		}
	}
}

/** Key of the store in the form's context. */
export const draftContext = Symbol('draft');
