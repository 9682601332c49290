import { customType, timestamp } from 'drizzle-orm/pg-core';

/** Raw bytes; drizzle-orm has no bytea column of its own. */
export const bytea = customType<{ data: Buffer }>({
	dataType() {
		return 'bytea';
	}
});

/** An instant with its offset resolved by the database; the database's clock is the one that counts. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });
