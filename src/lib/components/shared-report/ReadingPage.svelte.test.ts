import { render, screen, within } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import type { SharedReport } from '$lib/server/sharing/open';
import ReadingPage from './ReadingPage.svelte';

type Change = {
	reading?: Partial<SharedReport['reading']>;
	verdict?: Partial<SharedReport['verdict']>;
	run?: Partial<SharedReport['reading']['runs'][number]>;
	files?: Partial<SharedReport['files']>;
};

const known = {
	number: 'TB-0412',
	revision: 1,
	code: '8KQ2-7MTR',
	organisation: 'Tallis Brook Consulting',
	state: 'issued' as const,
	issuedAt: new Date('2026-11-19T14:06:31Z'),
	sha256: 'a'.repeat(64),
	replacedBy: null,
	certificateRevokedAt: null
};

function shared({ reading, verdict, run, files }: Change = {}): SharedReport {
	return {
		reading: {
			number: 'TB-0412',
			revision: 1,
			title: 'Roof surfaces, Marrow Coast',
			organisation: {
				name: 'Tallis Brook Consulting',
				address: ['4 Quay Row', 'Marrow'],
				registrationLine: null,
				contact: 'errors@tallisbrook.example'
			},
			addressee: 'To Marrow Coast Housing Trust, attn. S. Perrin',
			facts: ['project MC-2'],
			issuedOn: '19 November 2026',
			dates: [{ name: 'Calculated', day: '18 November 2026' }],
			question: 'Does the sheet keep an index of 82?',
			background: '',
			answer: '',
			runs: [
				{
					id: 'r1',
					title: 'Coated sheet',
					method: {
						id: 'm',
						version: '1.0.0',
						title: 'Solar reflectance index',
						averages: 'The index of a surface at steady state.',
						leavesOut: []
					},
					leading: 'index',
					headline: [
						'The index is ',
						{ strong: '84.0' },
						', with a 95 % coverage interval from 80.7 to 87.4.'
					],
					averages: 'It holds for a point, at one instant.',
					aside: null,
					finding: null,
					outputs: [
						{
							id: 'index',
							name: 'solar reflectance index',
							label: 'Solar reflectance index',
							symbol: 'I',
							average: 'a point, at one instant',
							estimate: '84.0',
							uncertainty: '1.7',
							interval: '80.7 to 87.4'
						}
					],
					coverage: '95 %',
					assumptions: [
						{
							id: 'reflectance',
							name: 'Solar reflectance',
							symbol: 'r',
							value: '0.690',
							inOwnUnit: null,
							uncertainty: '0.012',
							distribution: 'normal',
							provenance: 'citation',
							source: ['Data sheet ', { cite: 'sheet' }],
							note: '',
							share: '98 %',
							shareValue: 0.98
						}
					],
					deviations: [],
					drivers: 'The reflectance causes 98 % of the uncertainty.',
					cautions: [],
					notes: [],
					computedAt: '2026-11-18T09:00:00Z',
					engineVersion: '1.0.0',
					nodeVersion: '20',
					record: `sha256:${'b'.repeat(64)}`,
					equations: [],
					figure: null,
					...run
				}
			],
			cautions: [
				{
					code: 'hot-surface',
					level: 'caution',
					lead: 'Hot surface.',
					text: 'Bare skin can burn.',
					source: null,
					cite: null
				}
			],
			leftOut: { items: ['Rain.'], byAuthor: 'Moss.', notes: [] },
			deviations: [],
			scope: 'The sheet alone.',
			reliance: 'The Trust.',
			opinion: null,
			review: {
				statement: 'Not independently reviewed: nobody but its author has checked this document.',
				people: 'Written by Ines Tarrow.',
				signature: 'It is no professional engineer’s seal.'
			},
			history: [{ revision: 1, issued: '19 November 2026', reason: 'first issue', changes: [] }],
			notices: ['Local codes come first.'],
			code: '8KQ2-7MTR',
			rootFingerprint: 'c'.repeat(64),
			references: [{ id: 'sheet', text: 'Maker, data sheet' }],
			...reading
		},
		verdict: {
			subject: 'TB-0412 revision 1',
			heading: 'Genuine and unchanged.',
			rows: [
				{ id: 'signature', title: 'Signature', text: 'valid; Tallis Brook Consulting' },
				{ id: 'record', title: 'Recomputed', text: '14 of 14 figures equal to the last digit' }
			],
			decisive: 'revision',
			reasons: ['The signature holds.'],
			good: true,
			checkedAt: new Date('2026-12-01T12:00:00Z'),
			known,
			recomputed: true,
			sha256: 'a'.repeat(64),
			...verdict
		},
		files: {
			pdf: { name: 'TB-0412-r1.pdf', size: 134_000 },
			record: { name: 'TB-0412-r1-record.json', size: 812 },
			...files
		}
	};
}

const show = (change?: Change) => render(ReadingPage, { shared: shared(change), base: '/shared/token' });
const region = (name: string) => within(screen.getByRole('region', { name }));

describe('ReadingPage', () => {
	it('says who issued what to whom, how it stands, and what the verifier says with the time', () => {
		show();
		expect(screen.getByRole('heading', { level: 1 }).textContent).toBe('Roof surfaces, Marrow Coast');
		const main = screen.getByRole('main').textContent;
		expect(main).toContain('TB-0412, revision 1');
		expect(main).toContain(
			'To Marrow Coast Housing Trust, attn. S. Perrin, from Tallis Brook Consulting, 19 November'
		);
		expect(main).toMatch(
			/Genuine and unchanged\.\s+Checked 1.December.2026, 12:00.UTC\.\s+Computed again from its record: 14 of 14 figures/
		);
		expect(screen.queryByRole('alert')).toBeNull();
		expect(screen.getByRole('link', { name: /^Signed PDF/ }).getAttribute('href')).toBe(
			'/shared/token/report.pdf'
		);
		expect(screen.getByRole('link', { name: /^Computation record \(812 bytes\)/ }).getAttribute('href')).toBe(
			'/shared/token/record.json'
		);
	});

	it('sets question, answer with its interval, and cautions no smaller than the answer', () => {
		show();
		expect(region('The question').getByText(/keep an index of 82/)).toBeTruthy();
		const answer = region('The answer');
		const result = answer.getByText(/coverage interval from 80.7 to 87.4/);
		expect(result.className).toContain('text-lead');
		expect(answer.getByText('Hot surface.').closest('.text-lead')).not.toBeNull();
		expect(region('The results').getByRole('cell', { name: 'a point, at one instant' })).toBeTruthy();
		const source = region('Assumptions').getByRole('link', { name: '[1]' });
		expect(document.querySelector(source.getAttribute('href') ?? '')?.textContent).toContain(
			'Maker, data sheet'
		);
		expect(region('What was left out').getByText(/Moss\./)).toBeTruthy();
		expect(region('Review').getByText(/Not independently reviewed/)).toBeTruthy();
		expect(
			region('Is it the report that was issued?').getByText(/It is no professional engineer’s seal/)
		).toBeTruthy();
	});

	it('keeps the reviewer’s own figure beside the result, with what it averages', () => {
		show({
			run: {
				reviewerFigures: [
					{
						output: 'index',
						quantity: 'solar reflectance index',
						figure: 'not above 90',
						averages: 'the whole sheet',
						route: 'a hand estimate.',
						by: 'Ada Tallis, reviewer',
						comparison: 'The two average different things and are not compared.'
					}
				]
			}
		});
		const text = region('The results').getByText('not above 90').closest('p')?.textContent;
		expect(text?.replace(/\s+/g, ' ')).toContain(
			'Ada Tallis, reviewer for the solar reflectance index: not above 90. Route: a hand estimate. It averages the whole sheet. The two average different things'
		);
	});

	it('says on top that it was replaced, and leads to what is checked of the later revision', () => {
		const replacedBy = { revision: 2, code: 'AAAA-BBBB', issuedAt: new Date('2026-11-28T00:00:00Z') };
		show({ verdict: { good: false, known: { ...known, state: 'superseded', replacedBy } } });
		const alert = screen.getByRole('alert');
		expect(alert.textContent).toContain('Replaced.');
		expect(within(alert).getByRole('link', { name: 'Revision 2' }).getAttribute('href')).toBe(
			'/verify/AAAA-BBBB'
		);
		const heading = screen.getByRole('heading', { level: 1 });
		expect(alert.compareDocumentPosition(heading) & Node.DOCUMENT_POSITION_FOLLOWING).toBeTruthy();
	});

	it('says on top that it was withdrawn, or that the stored file is not what was signed', () => {
		const { unmount } = show({ verdict: { good: false, known: { ...known, state: 'withdrawn' } } });
		expect(screen.getByRole('alert').textContent).toContain('Withdrawn.');
		unmount();
		show({
			verdict: { good: false, known: null, heading: 'Altered: this is not the file that was signed.' },
			files: { record: null }
		});
		expect(screen.getByRole('alert').textContent).toContain('Altered');
		expect(screen.queryByRole('link', { name: /^Computation record/ })).toBeNull();
	});

	it('says where nothing was recomputed, and by which command it is', () => {
		show({
			verdict: {
				recomputed: false,
				rows: [{ id: 'record', title: 'Recomputed', lead: 'not recomputed', text: '; the reason is below' }]
			}
		});
		const check = region('Is it the report that was issued?');
		expect(check.getByText(/Not computed again here/)).toBeTruthy();
		expect(check.getByText('npm run -s verify -- TB-0412-r1.pdf --root noonmark-root.pem')).toBeTruthy();
	});

	it.each([
		['errors@tallisbrook.example', 'mailto:errors@tallisbrook.example?subject=TB-0412%2C%20revision%201'],
		['https://tallisbrook.example/errors', 'https://tallisbrook.example/errors'],
		['javascript:alert(1)', null],
		['the front desk', null],
		[null, null]
	])('offers %s for reporting an error as %s', (contact, href) => {
		const { organisation } = shared().reading;
		show({ reading: { organisation: { ...organisation, contact } } });
		const part = region('If you find an error');
		expect(part.getByText(/Corrections are published as revisions/).textContent).toContain(
			contact ?? 'write to its author at the address below'
		);
		const link = contact === null ? null : part.queryByRole('link', { name: contact });
		expect(link?.getAttribute('href') ?? null).toBe(href);
	});
});
