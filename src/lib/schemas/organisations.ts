import { z } from 'zod';
import { line } from './accounts';

export const roleNames = ['owner', 'author', 'reviewer', 'reader', 'billing'] as const;

/** What each role may do, as the pages say it. */
export const roleMeaning: Readonly<Record<(typeof roleNames)[number], string>> = {
	owner: 'runs the organisation: members, roles, guests, letterhead, plan',
	author: 'writes dossiers and reports, issues them, invites guests',
	reviewer: 'reads everything, comments, returns or approves reports',
	reader: 'reads everything',
	billing: 'plan, invoices and card, nothing else'
};

const lines = z
	.string()
	.default('')
	.transform((text) =>
		text
			.normalize('NFC')
			.split(/\r?\n/)
			.map((row) => row.replace(/\s+/gu, ' ').trim())
			.filter((row) => row !== '')
	)
	.pipe(
		z
			.array(z.string().max(100, 'Keep each line of the address below 100 characters.'))
			.max(6, 'Use at most six lines for the address.')
	)
	.refine((rows) => rows.every((row) => !/\p{Cc}/u.test(row)), {
		error: 'Leave control characters out of the address.'
	});

const prefix = z
	.string('Enter two to four letters.')
	.transform((text) => text.trim().toUpperCase())
	.pipe(z.string().regex(/^[A-Z]{2,4}$/, 'Use two to four letters from A to Z, such as TB.'));

export const newOrganisationSchema = z.object({
	name: line('the name of the organisation', 120),
	address: lines,
	numberPrefix: prefix
});

export const organisationSchema = newOrganisationSchema.extend({
	registrationLine: z
		.string()
		.default('')
		.transform((text) => text.normalize('NFC').replace(/\s+/gu, ' ').trim())
		.pipe(z.string().max(160, 'Use at most 160 characters for the registration line.'))
		.refine((text) => !/\p{Cc}/u.test(text), {
			error: 'Leave control characters out of the registration line.'
		}),
	/** An unticked box is not sent at all. */
	selfApproval: z
		.literal('yes')
		.optional()
		.transform((value) => value === 'yes')
});

const role = z.enum(roleNames);
const severalRoles = z
	.union([role.transform((one) => [one]), z.array(role)], 'Choose at least one role.')
	.transform((all) => roleNames.filter((name) => all.includes(name)));

const address = z
	.string('Enter an e-mail address.')
	.transform((text) => text.trim().normalize('NFC'))
	.pipe(
		z.email('Enter an e-mail address such as name@company.example.').max(254, 'This address is too long.')
	);

/** What cannot be undone wants a box ticked, also where no script asks. */
const certain = (message: string) => z.literal('yes', message);

export const rolesSchema = z.object({ userId: z.uuid(), roles: severalRoles });
export const inviteMemberSchema = z.object({ email: address, roles: severalRoles });
export const inviteGuestSchema = z.object({ email: address });
export const invitationSchema = z.object({ id: z.uuid() });
export const removeMemberSchema = z.object({
	userId: z.uuid(),
	certain: certain('Tick the box if this member is to be taken out.')
});
export const endGuestSchema = z.object({
	userId: z.uuid(),
	certain: certain('Tick the box if this guest’s access is to end.')
});
export const leaveSchema = z.object({
	organisationId: z.uuid(),
	certain: certain('Tick the box if you are leaving.')
});
export const leaveDossierSchema = z.object({ certain: certain('Tick the box if you are leaving.') });
export const switchSchema = z.object({ organisationId: z.uuid() });
