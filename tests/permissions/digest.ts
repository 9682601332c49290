import { createHash } from 'node:crypto';
import type pg from 'pg';

/* What all tables hold, so that "nothing was changed" can be said of the whole database. */

/** Tables that change by being asked at all, or by the clock; each with the reason. */
const leftOut: Readonly<Record<string, string>> = {
	rate_windows: 'counts every try, refused ones too',
	workers: 'heartbeat of the worker',
	billing_cursor: 'how far the reconciliation has read'
};

/** Columns that reading changes; each with the reason. */
const unread: Readonly<Record<string, { columns: string[]; why: string }>> = {
	sessions: { columns: ['last_seen_at', 'expires'], why: 'a session lives on by being used' },
	share_links: { columns: ['openings', 'last_opened_at'], why: 'openings of a link are counted' }
};

/** One hash a table of the service, jobs in its queue included. */
export async function digestOfTables(pool: pg.Pool): Promise<Record<string, string>> {
	const { rows: tables } = await pool.query<{ name: string }>(
		`select table_name as name from information_schema.tables
		where table_schema = 'public' and table_type = 'BASE TABLE' order by 1`
	);
	const found: Record<string, string> = {};
	for (const { name } of tables) {
		if (leftOut[name] !== undefined) continue;
		const without = (unread[name]?.columns ?? []).map((column) => ` - '${column}'`).join('');
		const { rows } = await pool.query<{ row: string }>(
			`select md5((to_jsonb(t)${without})::text) as row from "${name}" t order by 1`
		);
		found[name] = `${rows.length} rows ${hash(rows.map(({ row }) => row).join())}`;
	}
	// Jobs come and go by the clock as well; what somebody asked for carries the organisation's id.
	const { rows } = await pool.query<{ count: string }>(
		`select count(*)::text as count from pgboss.job where data ? 'organisationId'`
	);
	found['jobs of organisations'] = rows[0]?.count ?? '';
	return found;
}

function hash(text: string): string {
	return createHash('sha256').update(text).digest('hex').slice(0, 16);
}

/** Waits until the worker has done all that was asked for. @throws Error after two minutes */
export async function untilQuiet(pool: pg.Pool): Promise<void> {
	const until = Date.now() + 120_000;
	for (;;) {
		const { rows } = await pool.query<{ waiting: string }>(
			`select (
				(select count(*) from runs where state in ('queued', 'running')) +
				(select count(*) from issues where state in ('queued', 'rendering', 'signing')) +
				(select count(*) from previews where state in ('queued', 'rendering')) +
				(select count(*) from notices where sent_at is null and problem is null) +
				(select count(*) from billing_events where handled_at is null and problem is null) +
				(select count(*) from pgboss.job where state in ('created', 'active', 'retry') and data ? 'organisationId')
			)::text as waiting`
		);
		if (rows[0]?.waiting === '0') return;
		if (Date.now() > until) throw new Error(`The worker still has ${rows[0]?.waiting} things to do.`);
		await new Promise((resolve) => setTimeout(resolve, 250));
	}
}
