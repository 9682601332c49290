import { rights, type Need, type Role } from './rights';

/* One thing that can be asked of the service, how to ask for it, and what each kind of person is to be answered. */

/** Columns of the matrix. */
export const subjects = [
	'stranger',
	'newcomer',
	'owner',
	'billing',
	'author',
	'reviewer',
	'reader',
	'guest',
	'guest elsewhere'
] as const;
/** `newcomer` belongs to no organisation; `guest elsewhere` was invited to another dossier of the same organisation. */
export type Subject = (typeof subjects)[number];

/** Whose ids stand in the request: those of the members' own organisation, or of one that they do not belong to. */
export type Whose = 'own' | 'foreign';

export type Values = Readonly<Record<string, string>>;

/** What an entry's preparation works with: people acting on the copy that the entry is tried on. */
export interface Kit {
	ids: Values;
	/** Digest of a further session of the person who asks. */
	anotherSession(): Promise<string>;
	/** Id of a further organisation that the person who asks belongs to. */
	anotherOrganisation(): Promise<string>;
	/** Digest of a report of the copy, as its reviewer's page shows it. */
	digestOf(reportId: string): Promise<string>;
	/** Enters a figure beside a report's result, as the person who asks. @returns its id */
	ownFigure(reportId: string): Promise<string>;
	/** Token of an invitation of the person who asks, as guest of the copy's dossier. */
	invitation(): Promise<string>;
}

export interface Entry {
	route: string;
	/** As the route tree has it. */
	what: string;
	/** Address; `:name` stands for an id of the fixtures. */
	at: string;
	/** Body of a request that changes something, such that it is refused for nothing but missing rights. */
	form?: Readonly<Record<string, string | string[]>>;
	/** A file in it, made anew for each request. */
	file?: { field: string; name: string; bytes: () => Buffer };
	json?: unknown;
	/** Right that it takes; `nothing`: for everybody; `session`: signed in; `organisation`: and of an organisation. */
	needs: Need | 'nothing' | 'session' | 'organisation';
	/**
	 * Exactly what somebody is answered who may: the status, and for a redirect where to. `:new` stands for an id that
	 * was made by the request.
	 */
	done: string;
	/** People who are answered otherwise than their rights say, with the reason. */
	except?: Partial<Record<Subject, string | Record<Whose, string>>>;
	why?: string;
	/** Answer to who may, about ids of another organisation: "404" unless said. */
	foreign?: string;
	/** Answer where one id alone, by its name, belongs elsewhere: "404" unless said. */
	mixed?: Partial<Record<string, string>>;
	/** Markers that it may show to people who are otherwise not to see them, with the reason in `why`. */
	shows?: readonly string[];
	/** Done on the copy before the request; what it returns stands for further `:name`s. */
	prepare?: (kit: Kit) => Promise<Values>;
	/** Stands for what the preparation would return, where the request is refused before that matters. */
	sample?: Values;
	/** Ends the session that it is sent with, which is one of its own then. */
	endsSession?: true;
	/** Ends other sessions of the person: asked for after everything else. */
	last?: true;
	/** Its own proof stands in for the origin: why, and what a request from elsewhere is answered. */
	fromElsewhere?: { why: string; answer: string };
}

/** Ids that belong to the organisation, not to one of its dossiers. */
const ofOrganisation = new Set([
	'organisation',
	'member',
	'memberInvitation',
	'ownSession',
	'leftOrganisation',
	'checkout'
]);

/** Names of the fixtures' values in a text, or in the texts of a body. */
export function namesIn(part: unknown): string[] {
	if (typeof part === 'string')
		return [...new Set([...part.matchAll(/:([a-z][A-Za-z]*)/g)].map(([, name]) => name as string))];
	if (part === null || typeof part !== 'object') return [];
	return [...new Set(Object.values(part).flatMap(namesIn))];
}

/** A text with its `:name`s replaced. @throws Error for a name that the fixtures do not have */
export function filled(text: string, values: Values): string {
	let done = text;
	for (const name of namesIn(text)) {
		const value = values[name];
		if (value === undefined)
			throw new Error(`The fixtures have nothing called "${name}", asked for in ${text}.`);
		done = done.replaceAll(new RegExp(`:${name}(?![A-Za-z])`, 'g'), value);
	}
	return done;
}

export function namesOf(entry: Entry): string[] {
	return namesIn([entry.at, entry.form, entry.json]);
}

export function isChange({ what }: Entry): boolean {
	return !['page', 'layout', 'GET'].includes(what);
}

/** Asked for by a script, which is told by a status; everything else is a page or one of its forms. */
export function isEndpoint({ what }: Entry): boolean {
	return what === what.toUpperCase();
}

function roleOf(subject: Subject): Role | null {
	if (subject === 'stranger' || subject === 'newcomer') return null;
	return subject === 'guest elsewhere' ? 'guest' : subject;
}

/** Whether a request names, in one of these parts, something that lies out of the subject's sight. */
function isOutOfSight(names: readonly string[], subject: Subject, whose: Whose): boolean {
	if (names.length === 0) return false;
	return (
		whose === 'foreign' || (subject === 'guest elsewhere' && names.some((name) => !ofOrganisation.has(name)))
	);
}

/** Answer to a subject who asks with all ids of one organisation. */
export function expected(entry: Entry, subject: Subject, whose: Whose): string {
	const exception = entry.except?.[subject];
	if (exception !== undefined) return typeof exception === 'string' ? exception : exception[whose];
	if (entry.needs === 'nothing') return entry.done;
	if (subject === 'stranger') return isEndpoint(entry) ? '401' : '303 /sign-in';
	const outOfSight = isOutOfSight(namesOf(entry), subject, whose);
	if (entry.needs === 'session') return outOfSight ? (entry.foreign ?? '404') : entry.done;
	const role = roleOf(subject);
	if (role === null) return isEndpoint(entry) ? '404' : '303 /organisation/new';
	const right = entry.needs === 'organisation' ? 'may' : rights[entry.needs][role];
	if (right === 'hidden') return '404';
	// What the path names is looked up first. What a form or a query names is not, where the role does not allow the change: the
	// answer is the same for what is there and for what is not.
	if (right === 'sees') return isOutOfSight(namesIn(entry.at.split('?')[0]), subject, whose) ? '404' : '403';
	return outOfSight ? (entry.foreign ?? '404') : entry.done;
}

/** The request is let through to do its work. */
export function isAllowed(entry: Entry, subject: Subject, whose: Whose): boolean {
	return expected(entry, subject, whose) === entry.done;
}
