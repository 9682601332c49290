import { describe, expect, it } from 'vitest';
import { compute } from '../calculation';
import { chooseMethod, newDraft } from '../calculation/new-draft';
import { methodById } from '../methods';
import { answerView, emptyAnswer } from './answer-view';

const method = methodById('sunlit-equilibrium');
if (method === undefined) throw new Error('no method');
const draft = { ...chooseMethod(newDraft('find-value'), method), temperatureUnit: 'K' as const };

async function view(
	inputs: Record<string, { value: number; distribution?: { type: 'normal'; standardUncertainty: number } }>
) {
	if (method === undefined) throw new Error('no method');
	return answerView(
		draft,
		method,
		await compute({ method: method.id, inputs, evaluation: { trials: 10_000 } })
	);
}

describe('the running answer', () => {
	const bright = {
		irradiance: { value: 1361 },
		bondAlbedo: { value: 0.12, distribution: { type: 'normal' as const, standardUncertainty: 0.01 } },
		emissivity: { value: 0.95 }
	};

	it('says what it averages, how sure it is, and which assumption causes that', async () => {
		const answer = await view(bright);
		expect(answer.label).toContain('sunlit');
		expect(answer.averages).toContain('sunlit hemisphere');
		expect(answer.value).toMatch(/^308\.\d+\u00a0K$/);
		expect(answer.spread).toMatch(/^standard uncertainty/);
		expect(answer.interval).toMatch(/interval .* to /);
		expect(answer.shares.bondAlbedo).toBeCloseTo(1, 6);
	});

	it('gathers the outputs that wait for one input into one line', async () => {
		const waiting = (await view(bright)).others.filter(({ value }) => value.startsWith('needs'));
		expect(waiting).toEqual([
			{ label: expect.stringMatching(/ and 2 more$/) as string, value: 'needs the night-side temperature' }
		]);
		const night = await view({ ...bright, nightTemperature: { value: 100 } });
		expect(night.others.filter(({ value }) => value.startsWith('needs'))).toEqual([]);
		expect(night.others).toHaveLength(method.outputs.length - 1);
	});

	it('keeps the faults of an unreadable draft by field', () => {
		expect(emptyAnswer(draft, method, { 'in.bondAlbedo.value': 'not a number' })).toMatchObject({
			shares: {},
			faults: { 'in.bondAlbedo.value': 'not a number' }
		});
	});
});
