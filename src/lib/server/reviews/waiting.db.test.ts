import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { previewFile, requestPreview } from '../reports/preview';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { returnReport } from './decide';
import { recallReview } from './send';
import { reviewWorld, type World } from './testing/world';
import { typesetEquations } from './typeset';
import { readersOf, waitingForMe } from './waiting';

let db: Database;
let drop: () => Promise<void>;
let world: World;

beforeAll(async () => {
	setTestEnvironment();
	({ db, drop } = await testDatabase());
	world = await reviewWorld(db);
});
afterAll(async () => {
	await drop();
});

const ids = async (membership: Membership) =>
	(await waitingForMe(membership, db)).map(({ reportId }) => reportId);

describe('what waits for a reviewer', () => {
	it('is listed for those who were asked, longest waiting first, until it is decided or taken back', async () => {
		const first = await world.sent();
		const second = await world.draft();
		await world.send(second, world.author, [world.reviewer.userId, world.guest.userId]);
		expect(await ids(world.reviewer)).toEqual([first, second]);
		expect(await ids(world.guest)).toEqual([second]);
		expect(await ids(world.both)).toEqual([]);
		expect(await ids(world.author)).toEqual([]);
		expect(await ids(world.stranger)).toEqual([]);
		await returnReport(world.reviewer, first, { reasons: 'Name the table.' }, db);
		expect(await ids(world.reviewer)).toEqual([second]);
		await recallReview(world.author, second, db);
		expect(await ids(world.reviewer)).toEqual([]);
	});

	it('is out of a guest’s sight once the dossier is', async () => {
		const id = await world.draft();
		await world.send(id, world.author, [world.guest.userId]);
		expect(await ids({ ...world.guest, onlyDossiers: [] })).toEqual([]);
	});
});

describe('readersOf', () => {
	it('names who is asked, and says whether that is the person at the page', async () => {
		const id = await world.draft();
		await world.send(id, world.author, [world.guest.userId, world.reviewer.userId]);
		const mine = (await readersOf(world.reviewer, [id], db)).get(id);
		expect(mine?.names).toHaveLength(2);
		expect(mine?.me).toBe(true);
		expect((await readersOf(world.author, [id], db)).get(id)).toEqual({ names: mine?.names, me: false });
		expect((await readersOf(world.stranger, [id], db)).size).toBe(0);
		expect((await readersOf({ ...world.guest, onlyDossiers: [] }, [id], db)).size).toBe(0);
		const draft = await world.draft();
		expect((await readersOf(world.author, [draft], db)).size).toBe(0);
	});
});

describe('a reviewer, a guest and a reader', () => {
	it('see equations as mathematics and may ask for a preview, each in their own reach', async () => {
		const id = await world.sent();
		for (const membership of [world.reviewer, world.guest, world.reader]) {
			const [equation] = Object.entries(await typesetEquations(membership, id, db));
			expect(equation?.[0]).toMatch(new RegExp(`^run:${world.runId}/equation:`));
			expect(equation?.[1].mathml).toContain('<math');
			expect(await requestPreview(membership, id, db)).toMatch(/^[0-9a-f-]{36}$/);
		}
		await expect(typesetEquations(world.stranger, id, db)).rejects.toThrow('does not exist');
		await expect(requestPreview(world.stranger, id, db)).rejects.toThrow('does not exist');
		const preview = await requestPreview(world.reviewer, id, db);
		await expect(previewFile(world.stranger, preview, db)).rejects.toThrow('does not exist');
	});
});
