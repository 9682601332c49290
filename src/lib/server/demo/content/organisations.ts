import type { MemberRole } from '../../access/membership';

/* Who is in the demo. All of them are invented. */

export interface DemoPerson {
	name: string;
	email: string;
	roles: readonly MemberRole[];
}

export interface DemoOrganisation {
	name: string;
	address: string[];
	numberPrefix: string;
	/** The first founds it. */
	people: readonly [DemoPerson, ...DemoPerson[]];
	/** What it pays for; without one it has what there is to try. */
	plan?: { id: string; interval: 'month' | 'year'; seats: number; cancelled: boolean };
	/** Invited, and has not answered yet. */
	invited?: { email: string; roles: readonly MemberRole[] };
}

const everything: readonly MemberRole[] = ['owner', 'author', 'reviewer', 'billing'];

export const demoOrganisations: readonly DemoOrganisation[] = [
	{
		name: 'Tallis Brook Consulting',
		address: ['14 Weir Lane', 'Tallis Brook', 'Marrow Coast'],
		numberPrefix: 'TB',
		people: [
			{ name: 'Ines Tarrow', email: 'ines.tarrow@tallisbrook.example', roles: everything },
			{ name: 'Colm Hadley', email: 'colm.hadley@tallisbrook.example', roles: ['reviewer', 'reader'] },
			{ name: 'Bess Orrell', email: 'bess.orrell@tallisbrook.example', roles: ['billing'] }
		],
		plan: { id: 'practice', interval: 'month', seats: 6, cancelled: false },
		invited: { email: 'petra.lisk@tallisbrook.example', roles: ['author'] }
	},
	{
		name: 'The Ferrow Courier',
		address: ['2 Printers’ Yard', 'Ferrow'],
		numberPrefix: 'FC',
		people: [
			{ name: 'Oda Merrick', email: 'oda.merrick@ferrowcourier.example', roles: everything },
			{ name: 'Tavi Orme', email: 'tavi.orme@ferrowcourier.example', roles: ['reviewer'] }
		],
		plan: { id: 'practice', interval: 'year', seats: 2, cancelled: true }
	},
	{
		name: 'Idris Venn',
		address: ['9 Harbour Steps', 'Marrow Coast'],
		numberPrefix: 'IV',
		people: [{ name: 'Idris Venn', email: 'idris.venn@venn.example', roles: everything }]
	}
];

/** Belong to no organisation of their own; they come in as guests of the dossiers that they review. */
export const demoGuests: readonly { name: string; email: string }[] = [
	{ name: 'Maren Stole', email: 'maren.stole@stole-heat.example' }
];
