import { z } from 'zod';

const count = (message: string) => z.coerce.number(message).int(message).min(1, message);
const seats = count('Give the seats as a whole number, such as 3.');

export const intervalNames = { month: 'monthly', year: 'yearly' } as const;

/** A plan, by its seats. */
export const planChoiceSchema = z.object({
	seats,
	interval: z.enum(['month', 'year'], 'Choose monthly or yearly.')
});

export const packChoiceSchema = z.object({ packs: count('Give the packs as a whole number, such as 1.') });

/** What is to be bought: the one or the other. */
export const purchaseSchema = z.union([planChoiceSchema, packChoiceSchema]);

/** `mark` names one decision, so that sending its form twice is one change. */
export const seatChangeSchema = z.object({ seats, mark: z.uuid() });
