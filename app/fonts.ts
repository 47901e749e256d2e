import localFont from 'next/font/local'

/*
 * One call a subset, because a unicode-range belongs to a whole call. The subsets without a space or basic
 * letters go first in each stack (see globals.css): after a text face would come that face's metric-matched
 * system fallback, which would draw their letters before they were ever asked.
 */

const heading = localFont({
  src: [
    { path: '../fonts/besley-500.woff2', weight: '500' },
    { path: '../fonts/besley-700.woff2', weight: '700' },
  ],
  variable: '--face-heading',
  display: 'swap',
  adjustFontFallback: 'Times New Roman',
})

const headingExtended = localFont({
  src: [
    { path: '../fonts/besley-ext-500.woff2', weight: '500' },
    { path: '../fonts/besley-ext-700.woff2', weight: '700' },
  ],
  variable: '--face-heading-extended',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    { prop: 'unicode-range', value: 'U+100-130,U+132-151,U+154-2BA,U+1E00-1E9F,U+1EF2-1EFF,U+20A0-20AB' },
  ],
})

const text = localFont({
  src: '../fonts/instrument-sans.woff2',
  weight: '400 700',
  variable: '--face-text',
  display: 'swap',
  adjustFontFallback: 'Arial',
})

const textExtended = localFont({
  src: '../fonts/instrument-sans-ext.woff2',
  weight: '400 700',
  variable: '--face-text-extended',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    { prop: 'unicode-range', value: 'U+100-130,U+132-151,U+154-2BA,U+1E00-1E9F,U+1EF2-1EFF,U+20A0-20AB' },
  ],
})

// No metric-matched fallback here: it would be a proportional face, and columns would dance until the swap.
const mono = localFont({
  src: '../fonts/red-hat-mono.woff2',
  weight: '300 700',
  variable: '--face-mono',
  display: 'swap',
  adjustFontFallback: false,
})

const monoExtended = localFont({
  src: '../fonts/red-hat-mono-ext.woff2',
  weight: '300 700',
  variable: '--face-mono-extended',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    { prop: 'unicode-range', value: 'U+100-130,U+132-151,U+154-2BA,U+1E00-1E9F,U+1EF2-1EFF,U+20A0-20AB' },
  ],
})

const greek = localFont({
  src: '../fonts/noto-sans-greek.woff2',
  weight: '100 900',
  variable: '--face-greek',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+391-3A9,U+3B1-3C9' }],
})

const signs = localFont({
  src: '../fonts/noto-sans-signs.woff2',
  weight: '100 900',
  variable: '--face-signs',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [{ prop: 'unicode-range', value: 'U+B1-B3,U+B5,U+B9,U+BC-BE,U+2009' }],
})

const mathematics = localFont({
  src: '../fonts/noto-sans-math-signs.woff2',
  weight: '400',
  variable: '--face-mathematics',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    {
      prop: 'unicode-range',
      value: 'U+202F,U+2190-2193,U+2202-2211,U+221A,U+221E,U+2248-2265,U+25A0-25CF,U+2713',
    },
  ],
})

/** The class names that put every face's variable on the document. */
export const fontVariables = [
  heading,
  headingExtended,
  text,
  textExtended,
  mono,
  monoExtended,
  greek,
  signs,
  mathematics,
]
  .map((face) => face.variable)
  .join(' ')
