// No I, O, 0 or 1, which are misread on labels, and no vowels, so that no word arises.
const letters = 'BCDFGHJKLMNPQRSTVWXZ'
const digits = '23456789'

/** How many codes there are: sparse enough that a gap between two of them tells nothing. */
export const codeCount = letters.length * digits.length * digits.length

/**
 * A laboratory's code in one study, such as "K47": drawn, never derived.
 * @param randomBelow a uniform integer from 0 to below its argument; the system's random source outside tests
 * @param taken codes of the study already given away
 */
export function drawLaboratoryCode(
  randomBelow: (limit: number) => number,
  taken: ReadonlySet<string>,
): string {
  if (taken.size >= codeCount / 2) throw new RangeError('too many laboratories for three-place codes')
  for (;;) {
    const number = randomBelow(codeCount)
    const code =
      letters.charAt(number % letters.length) +
      digits.charAt(Math.floor(number / letters.length) % digits.length) +
      digits.charAt(Math.floor(number / letters.length / digits.length))
    if (!taken.has(code)) return code
  }
}
