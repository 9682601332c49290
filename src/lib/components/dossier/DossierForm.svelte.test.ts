import { render, screen } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { emptyDossier } from '$lib/schemas/dossier';
import DossierForm from './DossierForm.svelte';

const props = {
	heading: 'Edit the dossier',
	submit: 'Save',
	back: '/dossiers',
	errors: {},
	values: emptyDossier
};

describe('DossierForm', () => {
	it('lists a fault on top, ties it to its field and takes the focus there; what was typed stays', () => {
		const errors = { title: 'Give the dossier a title.' };
		render(DossierForm, { ...props, errors, values: { title: '', question: 'How hot?' } });
		const summary = screen.getByRole('alert');
		expect(document.activeElement).toBe(summary);
		const link = screen.getByRole('link', { name: 'Give the dossier a title.' });
		expect(link.getAttribute('href')).toBe('#title');
		const title = screen.getByLabelText('Title');
		expect(title.getAttribute('aria-invalid')).toBe('true');
		const described = (title.getAttribute('aria-describedby') ?? '').split(' ');
		expect(described.map((id) => document.getElementById(id)?.textContent).join(' ')).toContain(
			'Give the dossier a title.'
		);
		expect(screen.getByLabelText<HTMLTextAreaElement>(/The question/).value).toBe('How hot?');
	});

	it('shows what somebody else saved where it differs, and only that', () => {
		const values = { ...emptyDossier, title: 'Roofs', client: 'First tab' };
		const saved = { ...emptyDossier, title: 'Roofs', client: 'Second tab' };
		render(DossierForm, { ...props, values, saved, version: 3 });
		expect(screen.getByText('Saved in the meantime')).toBeTruthy();
		expect(screen.getAllByRole('definition').map((one) => one.textContent)).toEqual(['Second tab']);
		expect(document.querySelector<HTMLInputElement>('input[name=version]')?.value).toBe('3');
	});
});
