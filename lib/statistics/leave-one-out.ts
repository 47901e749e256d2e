/** The sum of all other values, for each of them: of those before and those after, lest digits cancel. */
export function leaveOneOut(values: Float64Array): Float64Array {
  const others = new Float64Array(values.length)
  let after = 0
  for (let at = values.length - 1; at >= 0; at -= 1) {
    others[at] = after
    after += values[at]!
  }
  let before = 0
  for (let at = 0; at < values.length; at += 1) {
    others[at]! += before
    before += values[at]!
  }
  return others
}
