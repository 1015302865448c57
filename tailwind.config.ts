import type { Config } from 'tailwindcss';

/** Colour tokens by role; their values, light and dark, stand once in src/app.css. */
const token = (name: string): string => `var(--${name})`;

export default {
	content: ['./src/**/*.{html,svelte,ts}'],
	theme: {
		colors: {
			transparent: 'transparent',
			current: 'currentColor',
			water: token('water'),
			sheet: token('sheet'),
			hair: token('hair'),
			rule: token('rule'),
			ink: token('ink'),
			faded: token('faded'),
			shallow: token('shallow'),
			deep: token('deep'),
			buff: token('buff'),
			ochre: token('ochre'),
			limit: token('limit'),
			'limit-wash': token('limit-wash')
		},
		fontFamily: {
			mono: ['IBM Plex Mono', 'monospace'],
			serif: ['Source Serif 4 Variable', 'serif']
		},
		fontSize: {
			xs: ['12px', '18px'],
			sm: ['14px', '20px'],
			base: ['16px', '24px'],
			lg: ['20px', '28px'],
			xl: ['28px', '36px']
		},
		spacing: { 0: '0', px: '1px', 1: '4px', 2: '8px', 3: '12px', 4: '20px', 5: '32px', 6: '52px' },
		borderRadius: { none: '0', DEFAULT: '2px' }
	}
} satisfies Config;
