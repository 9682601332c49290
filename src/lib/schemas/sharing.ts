import { z } from 'zod';
import { line } from './accounts';

/** After how many days a link may run out; empty for never. */
export const lifetimes = ['30', '90', '365', ''] as const;

export const lifetimeWords: Readonly<Record<(typeof lifetimes)[number], string>> = {
	'30': 'after 30 days',
	'90': 'after 90 days',
	'365': 'after a year',
	'': 'never'
};

/** The form that makes a link; from use cases `expiresInDays` is a number or null. */
export const shareLinkSchema = z.object({
	recipient: line('whom the link is for', 120),
	expiresInDays: z
		.enum(lifetimes, 'Choose when the link is to run out.')
		.transform((days) => (days === '' ? null : Number(days)))
});

export type ShareLinkInput = z.infer<typeof shareLinkSchema>;

export const revokeSchema = z.object({ linkId: z.uuid() });
