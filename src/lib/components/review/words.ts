import { dayText } from '$lib/report/dates';
import type { FigureView, ReviewPerson } from '$lib/server/reviews/types';

/** A person in a sentence. */
export function nameOf(person: ReviewPerson | null): string {
	if (person === null) return 'a former member';
	return person.guest ? `${person.name} (guest)` : person.name;
}

/** "Colm Hadley", "Colm Hadley and Runa Aldous", "Colm Hadley, Runa Aldous and Idris Venn". */
export function namesOf(people: readonly ReviewPerson[]): string {
	const names = people.map(({ name }) => name);
	const last = names.at(-1) ?? 'nobody';
	return names.length < 2 ? last : `${names.slice(0, -1).join(', ')} and ${last}`;
}

/** The day of an instant, as a report prints it. */
export function dayOf(at: Date): string {
	return dayText(at.toISOString());
}

/** "1 remark", "3 remarks". */
export function counted(count: number, one: string, many = `${one}s`): string {
	return `${count} ${count === 1 ? one : many}`;
}

/** For the beginning of a sentence. */
export function upperFirst(text: string): string {
	return `${text.charAt(0).toUpperCase()}${text.slice(1)}`;
}

/** What a reviewer's figure is, in the trade's words. */
export const figureKinds: Readonly<Record<FigureView['kind'], string>> = {
	value: 'a value',
	'upper-bound': 'an upper bound: the result must not be above it',
	'lower-bound': 'a lower bound: the result must not be below it'
};
