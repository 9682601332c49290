import type { Membership } from '../access/membership';
import { database, type Database, type Queryable } from '../db';
import type { FigureView } from './types';

/** As typed. */
export interface FigureInput {
	runId: string;
	output: string;
	kind: 'value' | 'upper-bound' | 'lower-bound';
	value: string;
	unit: string;
	/** May stay empty. */
	giveOrTake: string;
	/** What the figure averages, in words; may stay empty, and is then said to be unknown. */
	averages: string;
	/** By which other route it was found. */
	route: string;
}

/**
 * Keeps a reviewer's own figure beside a result, while the report is in review.
 * @returns its id
 * @throws InvalidInputError with faults by field
 */
export async function enterFigure(
	_membership: Membership | null,
	_reportId: string,
	_given: FigureInput,
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** Takes one's own figure back, while the report is in review: kept, no longer printed. @returns the report's id */
export async function withdrawFigure(
	_membership: Membership | null,
	_figureId: string,
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** The figures of the present revision, those taken back included, oldest first. */
export async function listFigures(
	_membership: Membership | null,
	_reportId: string,
	_db: Queryable = database()
): Promise<FigureView[]> {
	throw new Error('Being built.');
}
