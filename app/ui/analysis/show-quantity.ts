import { formatFigure } from '../primitives/format-figure'

/** Stands where there is no figure; the reason is said beside it. */
export const noFigure = '–'

/** h, k, C, G: three decimals. */
export function showStatistic(value: number | null): string {
  return value === null ? noFigure : formatFigure(value.toFixed(3))
}

/** Two figures, or "< 0.0001". */
export function showPValue(value: number | null): string {
  if (value === null) return noFigure
  if (value < 0.0001) return formatFigure('<0.0001')
  // Two figures and no fewer: 0.050 is not 0.05, and the limit lies just there.
  return formatFigure(value < 0.1 ? toDecimalText(value, 2) : value.toFixed(2))
}

/** The same within a sentence: "p = 0.012" or "p < 0.0001". */
export function sayPValue(value: number | null): string {
  if (value === null) return 'p unknown'
  return value < 0.0001 ? 'p\u00a0<\u00a00.0001' : `p\u00a0=\u00a0${showPValue(value)}`
}

/** A mean square, component or deviance to a number of significant figures, written out. */
export function showFigures(value: number | null, figures = 4): string {
  if (value === null) return noFigure
  if (value === 0) return '0'
  const place = Math.floor(Math.log10(Math.abs(value)))
  if (place > 9 || place < -7) return formatFigure(value.toExponential(figures - 1))
  return formatFigure(value.toFixed(Math.max(0, figures - 1 - place)))
}

/** Significant figures written out without an exponent. */
function toDecimalText(value: number, figures: number): string {
  const rounded = Number(value.toPrecision(figures))
  return rounded.toFixed(Math.max(0, figures - 1 - Math.floor(Math.log10(rounded))))
}

export function showInterval(interval: { lower: number | null; upper: number | null }, figures = 3): string {
  if (interval.lower === null || interval.upper === null) return noFigure
  return `${showFigures(interval.lower, figures)} to ${showFigures(interval.upper, figures)}`
}
