import { SQL, type QueryWithTypings } from 'drizzle-orm';
import type pg from 'pg';
import type PgBoss from 'pg-boss';
import type { Queryable } from '../db';

/** A finished statement with its `$n` parameters, in the shape that drizzle executes. */
class Statement extends SQL {
	constructor(
		private readonly text: string,
		private readonly values: unknown[]
	) {
		super([]);
	}

	override toQuery(): QueryWithTypings {
		return { sql: this.text, params: this.values };
	}
}

/** Lets the queue's statements run inside a transaction of ours, so that both are kept or neither is. */
export function executorIn(db: Queryable): PgBoss.Db {
	return {
		async executeSql(text, values) {
			const result = await db.execute(new Statement(text, values ?? []));
			return { rows: result.rows };
		}
	};
}

/** The queue's statements on a pool, each in a transaction of its own. */
export function executorOn(pool: pg.Pool): PgBoss.Db {
	return {
		async executeSql(text, values) {
			return await pool.query(text, values as unknown[] | undefined);
		}
	};
}
