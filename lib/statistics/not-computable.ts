/**
 * A statistic does not exist for the data at hand.
 *
 * `reason` is a code for programs, `message` the same in plain words. A caller's mistake (a fraction outside
 * 0 to 1, say) is a RangeError instead: it is a defect and must not be shown as a property of the data.
 */
export class NotComputable extends Error {
  readonly reason: string

  constructor(reason: string, words: string) {
    // Thrown for every cell that lacks a figure, and never by mistake: where from, which is dear to find out, tells nobody.
    const limit = Error.stackTraceLimit
    Error.stackTraceLimit = 0
    super(words)
    Error.stackTraceLimit = limit
    this.name = 'NotComputable'
    this.reason = reason
  }
}
