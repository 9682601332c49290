import type { Membership } from '../access/membership';
import { database, type Database, type Queryable } from '../db';
import type { CommentView } from './types';

/** Longest remark, characters. */
export const longestComment = 4000;

/** Remarks on a line. @returns its id @throws InvalidInputError (`body`, `place`), ConflictError once issued */
export async function addComment(
	_membership: Membership | null,
	_reportId: string,
	_given: { place: string; body: string },
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** Answers a remark. @returns the answer's id and the report's */
export async function answerComment(
	_membership: Membership | null,
	_commentId: string,
	_given: { body: string },
	_db: Database = database()
): Promise<{ id: string; reportId: string }> {
	throw new Error('Being built.');
}

/** Marks a remark as dealt with. @returns the report's id */
export async function settleComment(
	_membership: Membership | null,
	_commentId: string,
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** Opens a settled remark again. @returns the report's id */
export async function unsettleComment(
	_membership: Membership | null,
	_commentId: string,
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** All remarks of the report's present revision with their answers, oldest first. */
export async function listComments(
	_membership: Membership | null,
	_reportId: string,
	_db: Queryable = database()
): Promise<CommentView[]> {
	throw new Error('Being built.');
}
