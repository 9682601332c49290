import type { ParamMatcher } from '@sveltejs/kit';

const uuid = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;

/** An id as the database writes it; anything else is no page of ours and reaches no query. */
export const match: ParamMatcher = (value) => uuid.test(value);
