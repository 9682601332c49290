import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

/* Folders of the pure domain: they know neither SvelteKit nor the server nor the database. */
const domain = [
	'exact',
	'quantities',
	'methods',
	'uncertainty',
	'comparability',
	'calculation',
	'record',
	'figures',
	'wording',
	'report'
].map((folder) => `src/lib/${folder}/**/*.ts`);

/* Functions that engines may round differently: only src/lib/exact may touch them. */
const inexact = [
	'pow',
	'exp',
	'expm1',
	'log',
	'log1p',
	'log2',
	'log10',
	'sin',
	'cos',
	'tan',
	'asin',
	'acos',
	'atan',
	'atan2',
	'sinh',
	'cosh',
	'tanh',
	'asinh',
	'acosh',
	'atanh',
	'cbrt',
	'hypot',
	'random'
];

const noServer = {
	patterns: [
		{
			group: ['$lib/server/*', '**/server/**', '$app/*', '$env/*', '@sveltejs/*', 'svelte', 'svelte/*'],
			message: 'The domain knows neither SvelteKit nor the server.'
		},
		{
			group: [
				'drizzle-orm',
				'drizzle-orm/*',
				'pg',
				'stripe',
				'nodemailer',
				'pg-boss',
				'pdfmake',
				'pdfmake/*'
			],
			message: 'The domain knows no database, mail, payment or document library.'
		}
	]
};

export default ts.config(
	{
		ignores: [
			'build/',
			'.svelte-kit/',
			'.workers/',
			'.commands/',
			'data/',
			'node_modules/',
			'coverage/',
			'shots/',
			'samples/',
			'test-results/'
		]
	},
	js.configs.recommended,
	...ts.configs.strict,
	...svelte.configs.recommended,
	prettier,
	...svelte.configs.prettier,
	{
		languageOptions: { globals: { ...globals.browser, ...globals.node } },
		rules: {
			'@typescript-eslint/no-explicit-any': 'error',
			'@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
			'no-undef': 'off'
		}
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts', '**/*.svelte.js'],
		languageOptions: {
			parserOptions: {
				projectService: true,
				extraFileExtensions: ['.svelte'],
				parser: ts.parser,
				svelteConfig
			}
		},
		rules: {
			// Links are plain: the application is never served below a base path.
			'svelte/no-navigation-without-resolve': 'off'
		}
	},
	{
		files: domain,
		rules: {
			'no-restricted-imports': ['error', noServer],
			'no-restricted-properties': [
				'error',
				...inexact.map((property) => ({
					object: 'Math',
					property,
					message: 'Engines may round it differently; use src/lib/exact.'
				}))
			],
			'no-restricted-syntax': [
				'error',
				{
					selector: "BinaryExpression[operator='**']",
					message: 'Engines may round it differently; use src/lib/exact.'
				},
				{
					selector: "AssignmentExpression[operator='**=']",
					message: 'Engines may round it differently; use src/lib/exact.'
				}
			]
		}
	},
	{
		files: ['src/lib/**/*.test.ts', 'src/lib/exact/**/*.ts'],
		rules: { 'no-restricted-properties': 'off', 'no-restricted-syntax': 'off' }
	},
	{
		/* Routes are thin: they call use cases and never the database. */
		files: ['src/routes/**/*.ts', 'src/routes/**/*.svelte'],
		rules: {
			'no-restricted-imports': [
				'error',
				{
					patterns: [
						{
							group: [
								'drizzle-orm',
								'drizzle-orm/*',
								'pg',
								'stripe',
								'nodemailer',
								'pdfmake',
								'pdfmake/*',
								'$lib/server/db/*'
							],
							message: 'Routes parse, authorise and call one use case; they never touch the database.'
						}
					]
				}
			]
		}
	}
);
