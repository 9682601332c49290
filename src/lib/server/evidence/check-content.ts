import { InvalidInputError } from '../access/errors';
import { faultOfPdf, isPdf } from './check-pdf';
import { faultOfPng, isPng } from './check-png';
import { largestFile } from './limits';

export type EvidenceMediaType = 'application/pdf' | 'image/png';

/**
 * Decides by the bytes alone what a file is; its name and what the browser calls it count for nothing.
 * @param field form field that a fault is shown at
 * @throws InvalidInputError for anything but a sound PDF or PNG of at most 10 MB.
 */
export function checkContent(bytes: Buffer, field = 'file'): EvidenceMediaType {
	const refuse = (message: string): never => {
		throw new InvalidInputError(message, { [field]: message });
	};
	if (bytes.length === 0) return refuse('Choose a PDF or PNG file that is not empty.');
	if (bytes.length > largestFile) return refuse('The file is larger than 10 MB. Choose a smaller one.');
	if (isPdf(bytes)) {
		const fault = faultOfPdf(bytes);
		return fault === undefined ? 'application/pdf' : refuse(fault);
	}
	if (isPng(bytes)) {
		const fault = faultOfPng(bytes);
		return fault === undefined ? 'image/png' : refuse(fault);
	}
	return refuse('The file is neither a PDF nor a PNG. Save it as one of the two and add it again.');
}
