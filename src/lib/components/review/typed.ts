/** What was typed into forms that open and close, by the place that they belong to. */
export class Typed {
	#texts: Record<string, string> = {};

	/** @param came what a form that came back with faults had in it */
	constructor(came: { at: string; text: string } | null) {
		if (came !== null) this.#texts[came.at] = came.text;
	}

	at(place: string): string {
		return this.#texts[place] ?? '';
	}

	keep(place: string, text: string): void {
		this.#texts[place] = text;
	}

	/** Whether anything was typed that has not been sent. */
	any(): boolean {
		return Object.values(this.#texts).some((text) => text.trim() !== '');
	}
}
