import type { Config } from 'tailwindcss'

/*
 * The scales replace Tailwind's own rather than extend them: a colour, size or radius that is not the
 * product's cannot be written. The values of the colours, light and dark, are in app/globals.css.
 */
const config: Config = {
  content: ['./app/**/*.{ts,tsx}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      paper: 'var(--paper)',
      sheet: 'var(--sheet)',
      ink: 'var(--ink)',
      'ink-soft': 'var(--ink-soft)',
      rule: 'var(--rule)',
      edge: 'var(--edge)',
      verdigris: 'var(--verdigris)',
      'verdigris-wash': 'var(--verdigris-wash)',
      ochre: 'var(--ochre)',
      'ochre-wash': 'var(--ochre-wash)',
      madder: 'var(--madder)',
      'madder-wash': 'var(--madder-wash)',
      moss: 'var(--moss)',
      'moss-wash': 'var(--moss-wash)',
      indigo: 'var(--indigo)',
      'indigo-wash': 'var(--indigo-wash)',
    },
    fontFamily: {
      heading: 'var(--font-heading)',
      sans: 'var(--font-sans)',
      mono: 'var(--font-mono)',
    },
    // In rem, so that a reader's own text size is obeyed: 13, 15, 17, 21, 28 and 40 px at the usual 16.
    fontSize: {
      small: ['0.8125rem', { lineHeight: '1.45' }],
      base: ['0.9375rem', { lineHeight: '1.5' }],
      lead: ['1.0625rem', { lineHeight: '1.35' }],
      title: ['1.3125rem', { lineHeight: '1.3' }],
      page: ['1.75rem', { lineHeight: '1.2' }],
      figure: ['2.5rem', { lineHeight: '1.1' }],
    },
    borderRadius: { none: '0', DEFAULT: '2px', full: '9999px' },
    boxShadow: { none: 'none', float: '0 6px 24px rgb(0 0 0 / 0.18)' },
    extend: {
      // Where the margin finds room beside the content.
      screens: { margin: '72rem' },
      maxWidth: { text: '68ch', sheet: '90rem' },
    },
  },
}

export default config
