import type { SubmitFunction } from '@sveltejs/kit';

/** A form on its way: sent once, however often its button is pressed, and what was typed stays in it. */
export class Sending {
	busy = $state(false);
	readonly #taken: (() => void) | undefined;

	/** @param taken told once the form was taken without faults */
	constructor(taken?: () => void) {
		this.#taken = taken;
	}

	readonly submit: SubmitFunction = ({ cancel }) => {
		if (this.busy) {
			cancel();
			return;
		}
		this.busy = true;
		return async ({ result, update }) => {
			try {
				if (result.type === 'redirect' || result.type === 'success') this.#taken?.();
				await update({ reset: false });
			} finally {
				this.busy = false;
			}
		};
	};
}
