import { json } from '@sveltejs/kit';
import { checkReadiness } from '$lib/server/health/readiness';

/** 200 while database, migrations and queue are all in order, otherwise 503 with the part that is not. */
export const GET = async () => {
	const readiness = await checkReadiness();
	return json(readiness, { status: readiness.ready ? 200 : 503, headers: { 'cache-control': 'no-store' } });
};
