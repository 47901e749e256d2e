const thinSpace = '\u202f'
const minus = '\u2212'

/**
 * A reported number as it is printed: a real minus sign, thin spaces between thousands, and every decimal
 * that was reported. Takes text, never a number, because 4.10 and 4.1 are not the same report. A mark before
 * it (`<`, `>`, `≤`, `≥`) stays; anything that is not a decimal number comes back as it was.
 */
export function formatFigure(text: string): string {
  const match = /^\s*([<>≤≥]?)\s*([-\u2212+]?)(\d+)(\.\d+)?(?:[eE]([-\u2212+]?\d+))?\s*$/.exec(text)
  if (!match) return text
  const [, mark = '', sign = '', whole = '', decimals = '', exponent] = match
  const grouped = whole.replace(/\B(?=(?:\d{3})+$)/g, thinSpace)
  const power = exponent === undefined ? '' : `e${exponent.replace('-', minus)}`
  return (mark ? mark + thinSpace : '') + sign.replace('-', minus) + grouped + decimals + power
}
