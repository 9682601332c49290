import { describe, expect, it } from 'vitest';
import { methodById } from '../methods';
import type { CalculationDraft } from './draft';
import { draftSchema } from './draft-schema';
import { readComparison, readEvaluation, readGroup, settleSource, settleSources } from './form-fields';
import { chooseKind, chooseMethod, newDraft, numberInputs } from './new-draft';
import { fieldOfProblem, toRequest } from './to-request';

function method(id: string) {
	const found = methodById(id);
	if (found === undefined) throw new Error(`no method ${id}`);
	return found;
}

const sunlit = method('sunlit-equilibrium');
const index = method('solar-reflectance-index');

function answered(draft: CalculationDraft, values: Record<string, string>): CalculationDraft {
	const assumptions = { ...draft.assumptions };
	for (const [id, value] of Object.entries(values)) {
		const before = assumptions[id];
		if (before === undefined) throw new Error(`no input ${id}`);
		assumptions[id] = { ...before, value };
	}
	return { ...draft, assumptions };
}

describe('toRequest', () => {
	it('leaves untouched defaults out, so that the result lists them as such', () => {
		const draft = answered(chooseMethod(newDraft('find-value'), index), {
			solarReflectance: '0,33',
			thermalEmittance: '0.90'
		});
		const { request, faults } = toRequest(draft, index);
		expect(faults).toEqual({});
		expect(request?.inputs).toEqual({
			solarReflectance: { value: 0.33, unit: '' },
			thermalEmittance: { value: 0.9, unit: '' }
		});
	});

	it('names each missing or unreadable answer by its field and makes no request', () => {
		const draft = answered(chooseMethod(newDraft('find-value'), index), { solarReflectance: 'bright' });
		const { request, faults } = toRequest(draft, index);
		expect(request).toBeNull();
		expect(faults['in.solarReflectance.value']).toContain('bright');
		expect(faults['in.thermalEmittance.value']).toContain('enter a value');
	});

	it('carries the distribution in the unit of the value', () => {
		const draft = answered(chooseMethod(newDraft('find-value'), index), {
			solarReflectance: '33',
			thermalEmittance: '0.9'
		});
		const before = draft.assumptions.solarReflectance;
		if (before === undefined) throw new Error('no input');
		draft.assumptions.solarReflectance = {
			...before,
			unit: '%',
			spread: 'rectangular',
			spreadValues: { halfWidth: '1,5' }
		};
		expect(toRequest(draft, index).request?.inputs.solarReflectance).toEqual({
			value: 33,
			unit: '%',
			distribution: { type: 'rectangular', halfWidth: 1.5 }
		});
		draft.assumptions.solarReflectance.spreadValues = {};
		expect(toRequest(draft, index).faults['in.solarReflectance.p.halfWidth']).toContain('exact');
	});

	it('gives a comparison only for the kind of question that has one', () => {
		const base = chooseMethod(newDraft('test-limit'), index);
		const draft = answered(base, { solarReflectance: '0.33', thermalEmittance: '0.9' });
		if (draft.limit === null) throw new Error('no limit');
		draft.limit = { ...draft.limit, value: '29', sense: 'at-least', rule: 'guard-band', risk: '5' };
		expect(toRequest(draft, index).request?.compareWith).toMatchObject({
			kind: 'limit',
			value: 29,
			sense: 'at-least',
			rule: { type: 'guard-band', risk: 0.05 }
		});
		expect(
			toRequest({ ...draft, limit: { ...draft.limit, risk: '70' } }, index).faults['limit.risk']
		).toBeDefined();
		expect(toRequest(chooseKind(draft, 'find-value', index), index).request?.compareWith).toBeUndefined();
	});

	it('bounds trials and coverage', () => {
		const draft = answered(chooseMethod(newDraft('find-value'), index), {
			solarReflectance: '0.33',
			thermalEmittance: '0.9'
		});
		draft.evaluation = { ...draft.evaluation, trials: '1e12', coverage: '100' };
		expect(Object.keys(toRequest(draft, index).faults).sort()).toEqual(['ev.coverage', 'ev.trials']);
	});
});

describe('reading a submitted form', () => {
	const group = sunlit.groups[0]?.id ?? '';
	const inputs = numberInputs(sunlit).filter((input) => input.group === group);

	it('keeps what was typed, readable or not, and the other sections', () => {
		const draft = chooseMethod(newDraft('find-value'), sunlit);
		const form = new FormData();
		for (const input of inputs) form.set(`in.${input.id}.value`, `typed ${input.id}`);
		const read = readGroup(draft, sunlit, group, form);
		for (const input of inputs) expect(read.assumptions[input.id]?.value).toBe(`typed ${input.id}`);
		expect(read.visited).toContain(group);
		expect(draftSchema.safeParse(read).success).toBe(true);
	});

	it('takes the default’s source away with the default’s value and gives it back with it', () => {
		const input = numberInputs(sunlit).find((known) => known.default !== undefined);
		if (input === undefined) throw new Error('no default');
		const fresh = chooseMethod(newDraft('find-value'), sunlit).assumptions[input.id];
		if (fresh === undefined) throw new Error('no assumption');
		const changed = settleSource(input, { ...fresh, value: '0.5' });
		expect(changed.source.kind).toBeNull();
		expect(settleSource(input, { ...changed, value: fresh.value }).source).toEqual(fresh.source);
	});

	it('calls nothing a default of the method that is none, in no other words than the method’s', () => {
		const input = numberInputs(sunlit).find((known) => known.default !== undefined);
		const draft = chooseMethod(newDraft('find-value'), sunlit);
		const fresh = draft.assumptions[input?.id ?? ''];
		if (input === undefined || fresh === undefined) throw new Error('no default');
		expect(settleSource(input, fresh)).toBe(fresh);
		const settled = (value: string, text: string) =>
			settleSources(
				{
					...draft,
					assumptions: {
						...draft.assumptions,
						[input.id]: { ...fresh, value, source: { ...fresh.source, text } }
					}
				},
				sunlit
			).assumptions[input.id]?.source;
		expect(settled('0.123', 'Endorsed by an authority')).toEqual({ kind: null, text: '', evidenceId: null });
		expect(settled(fresh.value, 'Endorsed by an authority')).toEqual(fresh.source);
		expect(settleSources(draft, sunlit)).toEqual(draft);
	});

	it('ignores units, kinds and outputs that are not offered', () => {
		const draft = chooseMethod(newDraft('check-claim'), sunlit);
		const form = new FormData();
		form.set(`in.${inputs[0]?.id ?? ''}.unit`, 'parsec');
		form.set(`in.${inputs[0]?.id ?? ''}.spread`, 'wild');
		expect(readGroup(draft, sunlit, group, form).assumptions).toEqual(draft.assumptions);
		form.set('claim.output', 'nonsense');
		form.set('claim.value', '38');
		const read = readComparison(draft, sunlit, form);
		expect(read.claim?.output).toBe(draft.claim?.output);
		expect(read.claim?.value).toBe('38');
	});

	it('reads correlations as pairs and drops empty rows', () => {
		const form = new FormData();
		for (const [a, b, r] of [
			['irradiance', 'bondAlbedo', '0,5'],
			['', '', '']
		]) {
			form.append('corr.a', a ?? '');
			form.append('corr.b', b ?? '');
			form.append('corr.coefficient', r ?? '');
		}
		expect(readEvaluation(newDraft('find-value'), form).correlations).toEqual([
			{ a: 'irradiance', b: 'bondAlbedo', coefficient: '0,5' }
		]);
	});
});

describe('choosing another method', () => {
	it('keeps what both ask for', () => {
		const draft = answered(chooseMethod(newDraft('find-value'), sunlit), { bondAlbedo: '0.05' });
		const before = draft.assumptions.bondAlbedo;
		if (before === undefined) throw new Error('no albedo');
		draft.assumptions.bondAlbedo = {
			...before,
			source: { kind: 'judgement', text: 'dark', evidenceId: null }
		};
		const other = chooseMethod(draft, method('effective-temperature'));
		expect(other.assumptions.bondAlbedo?.value).toBe('0.05');
		expect(Object.keys(other.assumptions).sort()).toEqual(
			numberInputs(method('effective-temperature'))
				.map(({ id }) => id)
				.sort()
		);
	});
});

describe('fieldOfProblem', () => {
	it.each([
		['/inputs/bondAlbedo/value', 'in.bondAlbedo.value'],
		['/inputs/bondAlbedo/unit', 'in.bondAlbedo.unit'],
		['/inputs/bondAlbedo/distribution/halfWidth', 'in.bondAlbedo.p.halfWidth'],
		['/inputs/bondAlbedo/distribution', 'in.bondAlbedo.spread'],
		['/options/period', 'opt.period'],
		['/evaluation/trials', 'ev.trials'],
		['/correlations/0/coefficient', 'corr.0.coefficient'],
		['', 'form']
	])('%s belongs to %s', (path, field) => {
		expect(fieldOfProblem({ code: 'x', message: 'x', path })).toBe(field);
	});
});
