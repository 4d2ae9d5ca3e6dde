import typography from '@tailwindcss/typography';

/** Names for the tokens of src/lib/styles/tokens: no values live here. */
/** @type {import('tailwindcss').Config} */
export default {
	darkMode: ['selector', '[data-theme="night"]'],
	theme: {
		extend: {
			colors: Object.fromEntries(
				[
					'mist',
					'sheet',
					'silt',
					'ink',
					'ink2',
					'rule',
					'edge',
					'water',
					'deep',
					'flood',
					'amber',
					'moss',
					'iris'
				].map((name) => [name, `var(--${name})`])
			),
			fontFamily: {
				sans: 'var(--font-text)',
				mono: 'var(--font-mono)'
			},
			fontSize: {
				xs: 'var(--size-tiny)',
				sm: 'var(--size-small)',
				table: 'var(--size-table)',
				base: 'var(--size-base)',
				lg: 'var(--size-large)',
				xl: 'var(--size-title)'
			},
			maxWidth: { text: '72ch', sentence: '60ch', page: '92rem' },
			minHeight: { target: 'var(--target)' },
			minWidth: { target: 'var(--target)' },
			borderRadius: { DEFAULT: '3px' }
		}
	},
	plugins: [typography]
};
