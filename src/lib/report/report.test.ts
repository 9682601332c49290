import { describe, expect, it } from 'vitest';
import { computeNow } from '../calculation';
import type { AssumptionDraft, CalculationDraft } from '../calculation/draft';
import { newClaim, newDraft } from '../calculation/new-draft';
import { toRequest } from '../calculation/to-request';
import { methodById } from '../methods';
import { plainText } from '../wording';
import { recordHash } from '../record';
import {
	buildReportModel,
	dayText,
	emptyReportText,
	instantText,
	recordAttachment,
	unmetDuties,
	type ReportModel,
	type ReportSource
} from '.';

function assumption(value: string, source: Partial<AssumptionDraft['source']>, u?: string): AssumptionDraft {
	return {
		value,
		unit: '',
		spread: u ? 'normal' : 'exact',
		spreadValues: u ? { standardUncertainty: u } : {},
		source: { kind: null, text: '', evidenceId: null, ...source },
		note: ''
	};
}

const albedo = assumption('0.050', { kind: 'citation', text: 'Notice, table 1.' }, '0.010');
const emissivity = assumption('0.95', { kind: 'judgement', text: 'bare rock' });

function source(
	change: Partial<ReportSource> = {},
	draftChange: Partial<CalculationDraft> = {}
): ReportSource {
	const method = methodById('sunlit-equilibrium');
	if (!method) throw new Error('no method');
	const draft: CalculationDraft = {
		...newDraft('find-value'),
		method: method.id,
		assumptions: { bondAlbedo: albedo, emissivity },
		...draftChange
	};
	const { request, faults } = toRequest(draft, method);
	if (!request) throw new Error(JSON.stringify(faults));
	return {
		template: 'client-memo',
		language: 'en-GB',
		organisation: { name: 'Tallis Brook', address: ['4 Quay Row'], registrationLine: null },
		report: {
			number: 'TB-1',
			revision: 1,
			state: 'draft',
			title: 'Orrin',
			text: { ...emptyReportText, question: 'How hot?' }
		},
		addressee: { name: 'The Trust', contact: '' },
		scope: '',
		reliance: '',
		projectNumber: '',
		orderNumber: '',
		author: { name: 'Ada' },
		authoriser: null,
		dates: { inputData: '2026-11-26T10:05:00Z', issue: null },
		verification: null,
		runs: [
			{
				id: 'run-1',
				title: 'Sunlit side',
				draft,
				request,
				result: computeNow(request),
				engineVersion: '0.1.0',
				nodeVersion: '20.20.2',
				computedAt: '2026-11-27T10:05:00Z'
			}
		],
		evidence: [],
		review: { kind: 'not-reviewed' },
		history: [],
		...change
	};
}

const build = (given: ReportSource): ReportModel => buildReportModel(given, { methodOf: methodById });

describe('the model of a report', () => {
	const model = build(source());
	const [run] = model.runs;

	it('is plain JSON that survives storage', () => {
		expect(JSON.parse(JSON.stringify(model))).toEqual(model);
	});

	it('prints assumptions as typed, with uncertainty, share and numbered sources', () => {
		const row = run?.assumptions.find((item) => item.id === 'bondAlbedo');
		expect(row).toMatchObject({
			value: '0.050',
			uncertainty: '0.010',
			distribution: 'normal',
			provenance: 'citation'
		});
		expect(row?.share).toBe('100\u202f%');
		expect(row?.source).toContainEqual({ cite: 'source-1' });
		expect(model.references.find((item) => item.id === 'source-1')?.text).toBe('Notice, table 1.');
		const standard = run?.assumptions.find((item) => item.id === 'irradiance');
		expect(standard?.provenance).toBe('default');
		expect(plainText(standard?.source ?? [])).toContain('method’s default');
	});

	it('cites nothing that is not among its references', () => {
		const cited = [...JSON.stringify(model.runs).matchAll(/"cite":"([^"]+)"/g)].map(([, id]) => id);
		const known = new Set(model.references.map((item) => item.id));
		expect(cited.length).toBeGreaterThan(3);
		for (const id of cited) expect(known).toContain(id);
	});

	it('lists replaced defaults by itself', () => {
		expect(run?.deviations).toEqual(['The method’s default emissivity of 1 was replaced by 0.95.']);
	});

	it('puts numbers into the equations, in the method’s own units', () => {
		const put = run?.equations.find((row) => row.id === 'sunlit-mean')?.put;
		expect(put).toMatch(/\\tfrac\{4\}\{5\} \\times 39\d\.\d\\,\\mathrm\{K\}/);
	});

	it('takes out characters that no document can hold', () => {
		const given = source();
		given.report.title = 'Or\u0000rin\u0007\r\nx';
		expect(build(given).title).toBe('Orrin\nx');
	});

	it('attaches records whose hash is the one they state, in the same bytes whatever the order of keys', () => {
		const text = recordAttachment(model);
		const parsed = JSON.parse(text);
		expect(parsed).toMatchObject({
			format: 'noonmark-record/1',
			report: { number: 'TB-1', revision: 1, code: null }
		});
		const [record] = parsed.records;
		expect(recordHash(record.request, record.result)).toBe(run?.record);
		const shuffled = JSON.parse(JSON.stringify(model), (_key, value: unknown) =>
			value && typeof value === 'object' && !Array.isArray(value)
				? Object.fromEntries(Object.entries(value).reverse())
				: value
		) as ReportModel;
		expect(recordAttachment(shuffled)).toBe(text);
	});
});

describe('duties', { timeout: 30_000 }, () => {
	const codes = (given: ReportSource) => unmetDuties(build(given)).map((duty) => duty.code);

	it('are met by a report that states everything', () => {
		expect(codes(source())).toEqual([]);
	});

	it('ask for an addressee, or for the word that there is none', () => {
		expect(codes(source({ addressee: null }))).toEqual(['addressee-missing']);
		expect(codes(source({ addressee: 'none' }))).toEqual([]);
	});

	it('ask for the question, the address and the title', () => {
		const given = source({ organisation: { name: 'T', address: [' '], registrationLine: null } });
		given.report.title = ' ';
		given.report.text = emptyReportText;
		expect(codes(given)).toEqual(['title-missing', 'question-missing', 'address-missing']);
	});

	it('ask where each given value comes from, and name its place', () => {
		const unsure = { ...albedo, source: { kind: 'not-sure', text: '', evidenceId: null } } as AssumptionDraft;
		const guess = {
			...emissivity,
			source: { kind: 'judgement', text: ' ', evidenceId: null }
		} as AssumptionDraft;
		const model = build(source({}, { assumptions: { bondAlbedo: unsure, emissivity: guess } }));
		expect(unmetDuties(model).map((duty) => duty.place)).toEqual([
			'run:run-1/input:bondAlbedo',
			'run:run-1/input:emissivity'
		]);
	});

	it('refuse a result that had not converged', () => {
		const few = source({}, { evaluation: { ...newDraft('find-value').evaluation, trials: '10000' } });
		expect(few.runs[0]?.result.evaluation.converged).toBe(false);
		expect(codes(few)).toEqual(['not-converged']);
	});

	it('refuse a text that says two numbers agree where the comparison was stopped', () => {
		const method = methodById('sunlit-equilibrium');
		const output = method?.outputs.find((spec) => spec.id === 'sunlitMeanTemperature');
		if (!output) throw new Error('no output');
		const claim = {
			...newClaim(output),
			value: '38',
			unit: 'degC',
			area: 'whole-sphere' as const,
			citation: 'Notice, p. 3'
		};
		const given = source({}, { kind: 'check-claim', claim });
		given.report.text = { ...given.report.text, answer: 'The stated value agrees with the computed one.' };
		expect(codes(given)).toEqual(['agreement-claimed']);
		given.report.text = { ...given.report.text, answer: 'The two cannot be said to agree.' };
		expect(codes(given)).toEqual([]);
	});
});

describe('dates', () => {
	it('state their offset and do not move with the machine', () => {
		expect(dayText('2026-11-28T23:30:00Z')).toBe('28\u00a0November\u00a02026');
		expect(instantText('2026-07-03T12:30:00+01:00')).toBe('3\u00a0July\u00a02026, 12:30\u00a0UTC+01:00');
		expect(instantText('2026-07-03T12:30:00-05:00')).toContain('UTC−05:00');
		expect(() => instantText('yesterday')).toThrow('not an instant');
	});
});
