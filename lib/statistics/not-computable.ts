/**
 * A statistic does not exist for the data at hand.
 *
 * `reason` is a code for programs, `message` the same in plain words. A caller's mistake (a fraction outside
 * 0 to 1, say) is a RangeError instead: it is a defect and must not be shown as a property of the data.
 */
export class NotComputable extends Error {
  readonly reason: string

  constructor(reason: string, words: string) {
    super(words)
    this.name = 'NotComputable'
    this.reason = reason
  }
}
