import { describe, expect, it } from 'vitest';
import { errorHeading } from './error-heading';

describe('the heading of an error page', () => {
	it('calls only a fault of the service its own', () => {
		expect(errorHeading(500)).toBe('Something went wrong on our side.');
		expect(errorHeading(503)).toBe('Something went wrong on our side.');
		for (const status of [400, 401, 403, 404, 405, 409, 413, 415, 429]) {
			expect(errorHeading(status), String(status)).not.toContain('our side');
		}
	});
});
