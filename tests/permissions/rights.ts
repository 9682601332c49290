/*
 * Who may do what, written down a second time from the description of the roles and not taken from the code under
 * test: where the two differ, one of them is wrong.
 */

export const roles = ['owner', 'billing', 'author', 'reviewer', 'reader', 'guest'] as const;
export type Role = (typeof roles)[number];

/** `may`: does it. `sees`: may look but not do, 403. `hidden`: may not even see that it is there, 404. */
export type Right = 'may' | 'sees' | 'hidden';

type Row = Readonly<Record<Role, Right>>;

function row(owner: Right, billing: Right, author: Right, reviewer: Right, reader: Right, guest: Right): Row {
	return { owner, billing, author, reviewer, reader, guest };
}

/** A guest's rights count within the dossier that they were invited to. */
export const rights = {
	/* ........................ owner ... billing ... author .. reviewer . reader ... guest */
	'read dossiers': row('may', 'hidden', 'may', 'may', 'may', 'may'),
	'write dossiers': row('sees', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'invite guests': row('may', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'read calculations': row('may', 'hidden', 'may', 'may', 'may', 'may'),
	'write calculations': row('sees', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'add evidence': row('sees', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'read reports': row('may', 'hidden', 'may', 'may', 'may', 'may'),
	'write reports': row('sees', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'remark on reports': row('sees', 'hidden', 'may', 'may', 'sees', 'may'),
	'review reports': row('sees', 'hidden', 'sees', 'may', 'sees', 'may'),
	'issue reports': row('sees', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'share reports': row('may', 'hidden', 'may', 'sees', 'sees', 'sees'),
	'see the organisation': row('may', 'may', 'may', 'may', 'may', 'hidden'),
	'run the organisation': row('may', 'sees', 'sees', 'sees', 'sees', 'hidden'),
	'see members': row('may', 'hidden', 'may', 'may', 'may', 'hidden'),
	'manage members': row('may', 'hidden', 'sees', 'sees', 'sees', 'hidden'),
	pay: row('may', 'may', 'sees', 'sees', 'sees', 'hidden')
} as const satisfies Record<string, Row>;

export type Need = keyof typeof rights;
