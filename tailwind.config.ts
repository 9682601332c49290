import forms from '@tailwindcss/forms';
import typography from '@tailwindcss/typography';
import type { Config } from 'tailwindcss';

/*
 * The tokens of the look. Each colour is a CSS variable, set in src/app.css for light, dark and print, so that
 * figures drawn on the server follow the reader's scheme as well.
 */
const config: Config = {
	content: ['./src/**/*.{html,svelte,ts}'],
	theme: {
		extend: {
			colors: {
				paper: 'var(--paper)',
				sheet: 'var(--sheet)',
				ink: 'var(--ink)',
				soft: 'var(--soft)',
				rule: 'var(--rule)',
				sun: { DEFAULT: 'var(--sun)', fill: 'var(--sun-fill)', wash: 'var(--sun-wash)' },
				shade: { DEFAULT: 'var(--shade)', fill: 'var(--shade-fill)', wash: 'var(--shade-wash)' },
				stop: 'var(--stop)'
			},
			fontFamily: {
				serif: ['"Noto Serif"', 'serif'],
				sans: ['"Noto Sans"', 'sans-serif'],
				mono: ['"Noto Sans Mono"', 'monospace'],
				math: ['"Noto Sans Math"', 'math']
			},
			fontSize: {
				small: ['0.82rem', '1.4'],
				label: ['0.9rem', '1.45'],
				base: ['1rem', '1.55'],
				lead: ['1.12rem', '1.6'],
				title: ['1.75rem', '1.2'],
				answer: ['2rem', '1.2']
			},
			borderRadius: { DEFAULT: '2px' },
			maxWidth: { measure: '62ch', column: '680px', page: '1280px' },
			screens: { wide: '720px', full: '1120px' }
		}
	},
	plugins: [forms({ strategy: 'class' }), typography]
};

export default config;
