/*
 * What a number format says about the digits a person saw. A file keeps 1.1 for a cell that shows 1.10; the
 * lost digit is part of the result, and only the format still knows it.
 */

export type NumberFormat =
  | { kind: 'general' }
  | { kind: 'fixed'; decimals: number }
  | { kind: 'percent'; decimals: number }
  | { kind: 'scientific'; decimals: number }
  | { kind: 'date' }

/** The formats that files name by number alone; those not listed show a number as it is. */
const builtInCodes: Readonly<Record<number, string>> = {
  1: '0',
  2: '0.00',
  3: '#,##0',
  4: '#,##0.00',
  9: '0%',
  10: '0.00%',
  11: '0.00E+00',
  37: '#,##0',
  38: '#,##0',
  39: '#,##0.00',
  40: '#,##0.00',
  41: '#,##0',
  42: '#,##0',
  43: '#,##0.00',
  44: '#,##0.00',
  48: '##0.0E+0',
}

export function builtInFormat(id: number): NumberFormat {
  // 27 to 36 and 50 to 58 are dates of East Asian calendars.
  const isDate =
    (id >= 14 && id <= 22) || (id >= 27 && id <= 36) || (id >= 45 && id <= 47) || (id >= 50 && id <= 58)
  if (isDate) return { kind: 'date' }
  const code = builtInCodes[id]
  return code === undefined ? { kind: 'general' } : readNumberFormat(code)
}

export function readNumberFormat(code: string): NumberFormat {
  const section = firstSection(code)
  if (/\[(?:h+|m+|s+)\]/i.test(section)) return { kind: 'date' }
  const bare = section.replace(/\[[^\]]*\]/g, '')
  if (/general/i.test(bare) || bare.includes('@') || bare === '') return { kind: 'general' }
  const scientific = /\.?([0#?]*)E[+-]/i.exec(bare)
  if (scientific !== null) {
    const decimals = scientific[0].startsWith('.') ? countShown(scientific[1] ?? '') : 0
    return { kind: 'scientific', decimals }
  }
  if (/[ymdhs]/i.test(bare)) return { kind: 'date' }
  if (bare.includes('/')) return { kind: 'general' }
  const decimals = countShown(/\.([0#?]+)/.exec(bare)?.[1] ?? '')
  return bare.includes('%') ? { kind: 'percent', decimals } : { kind: 'fixed', decimals }
}

/** Throws away nothing that was stored: digits beyond the format stay, digits short of it are filled in. */
export function showNumber(raw: string, format: NumberFormat): string {
  const value = Number(raw)
  if (raw.trim() === '' || !Number.isFinite(value)) return raw
  const { sign, digits, exponent } = shortestDigits(value)
  if (format.kind === 'scientific') {
    const fraction = digits.slice(1).padEnd(format.decimals, '0')
    const mantissa = fraction === '' ? digits.slice(0, 1) : `${digits.slice(0, 1)}.${fraction}`
    return `${sign}${mantissa}E${exponent}`
  }
  if (format.kind === 'percent') return `${sign}${write(digits, exponent + 2, format.decimals)}%`
  return sign + write(digits, exponent, format.kind === 'fixed' ? format.decimals : 0)
}

/** A day counted by a spreadsheet, as calendar text; no time zone comes near it. */
export function showDate(raw: string, from1904: boolean): string {
  const serial = Number(raw)
  if (raw.trim() === '' || !Number.isFinite(serial) || serial < 0 || serial > 2_958_466) return raw
  // The calendar of 1900 counts a 29 February that never was, so days before 1 March 1900 lie one off.
  const epoch = from1904 ? Date.UTC(1904, 0, 1) : Date.UTC(1899, 11, serial < 60 ? 31 : 30)
  const seconds = Math.round(serial * 86_400)
  const text = new Date(epoch + seconds * 1000).toISOString()
  if (serial < 1) return text.slice(11, 19)
  return seconds % 86_400 === 0 ? text.slice(0, 10) : `${text.slice(0, 10)} ${text.slice(11, 19)}`
}

/** The section for positive numbers, without its quoted and escaped literals. */
function firstSection(code: string): string {
  let bare = ''
  let quoted = false
  for (let at = 0; at < code.length && at < 255; at += 1) {
    const character = code.charAt(at)
    if (character === '"') quoted = !quoted
    else if (quoted) continue
    else if (character === '\\' || character === '_' || character === '*') at += 1
    else if (character === ';') break
    else bare += character
  }
  return bare
}

/** Only a zero forces a digit to be shown. */
function countShown(placeholders: string): number {
  return placeholders.lastIndexOf('0') + 1
}

/** The fewest digits that give the same number again, as d.ddd × 10^exponent. */
function shortestDigits(value: number): { sign: string; digits: string; exponent: number } {
  const [mantissa = '0', exponent = '0'] = Math.abs(value).toExponential().split('e')
  return { sign: value < 0 ? '-' : '', digits: mantissa.replace('.', ''), exponent: Number(exponent) }
}

function write(digits: string, exponent: number, decimals: number): string {
  // Far from one the text would be nothing but zeros, and whoever reads it refuses it anyway.
  if (Math.abs(exponent) > 60) return `${digits.slice(0, 1)}.${digits.slice(1) || '0'}E${exponent}`
  const point = exponent + 1
  const whole = point <= 0 ? '0' : digits.slice(0, point).padEnd(point, '0')
  const fraction = (point <= 0 ? '0'.repeat(-point) + digits : digits.slice(point)).padEnd(decimals, '0')
  return fraction === '' ? whole : `${whole}.${fraction}`
}
