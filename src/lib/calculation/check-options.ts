import type { Method } from '../methods/types';
import { isPlainObject, numberAt, objectAt, own, pointer, quoted } from './json';
import { describeRange, isInside } from './check-input';
import { ProblemError } from './problem';
import type { Options } from './types';

/** The method's options, each as given or at its default. */
export function optionsAt(method: Method, given: unknown, path: string): Options {
	if (given !== undefined && !isPlainObject(given)) {
		throw new ProblemError('wrong-type', 'Options are an object.', path);
	}
	const entries =
		given === undefined
			? {}
			: objectAt(
					given,
					path,
					method.options.map(({ id }) => id)
				);
	const options: Options = {};
	for (const option of method.options) {
		const value = own(entries, option.id);
		const at = pointer(path, option.id);
		if (value === undefined) {
			options[option.id] = option.default;
		} else if (option.choices !== undefined) {
			const choice = option.choices.find((one) => one.value === value);
			if (choice === undefined) {
				throw new ProblemError(
					'unknown-choice',
					`${quoted(value)} is not one of ${option.choices.map((one) => one.value).join(', ')}.`,
					at
				);
			}
			options[option.id] = choice.value;
		} else {
			const number = numberAt(value, at);
			const range = option.range;
			if (range !== undefined && !isInside(number, range)) {
				throw new ProblemError(
					'outside-domain',
					`The ${option.name} must be ${describeRange(range, '')}.`,
					at
				);
			}
			if (range?.integer === true && !Number.isInteger(number)) {
				throw new ProblemError('outside-domain', `The ${option.name} must be a whole number.`, at);
			}
			options[option.id] = number;
		}
	}
	return options;
}
