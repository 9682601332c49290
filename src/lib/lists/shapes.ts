import type { ListShape } from './query';

/* Columns that each list sorts by, and how a bare list is sorted: what was worked on last comes first. */

export const dossierColumns = ['title', 'client', 'number', 'changed'] as const;
export type DossierColumn = (typeof dossierColumns)[number];
export const dossierList: ListShape<DossierColumn> = {
	columns: dossierColumns,
	sort: 'changed',
	order: 'desc'
};

export const calculationColumns = ['title', 'dossier', 'method', 'changed'] as const;
export type CalculationColumn = (typeof calculationColumns)[number];
export const calculationList: ListShape<CalculationColumn> = {
	columns: calculationColumns,
	sort: 'changed',
	order: 'desc'
};

export const reportColumns = ['number', 'title', 'addressee', 'state', 'revised'] as const;
export type ReportColumn = (typeof reportColumns)[number];
export const reportStateNames = [
	'draft',
	'in-review',
	'returned',
	'approved',
	'issued',
	'superseded',
	'withdrawn'
] as const;
export const reportList: ListShape<ReportColumn> = {
	columns: reportColumns,
	sort: 'revised',
	order: 'desc',
	states: reportStateNames
};
