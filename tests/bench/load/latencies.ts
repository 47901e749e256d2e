/** What an arrival that failed or was given up counts as. Left out, a dead server would have the best figures. */
export const timeOutMs = 10_000

/** Under 5,000 samples the interval about a 99th percentile reaches towards the maximum, and the figure says little. */
export const samplesForP99 = 5_000
/** The same for a 95th percentile, which is still printed, with a mark. */
export const samplesForP95 = 1_000

export interface Summary {
  readonly count: number
  readonly errors: number
  readonly p50: number
  readonly p95: number
  /** Null where there are too few samples to tell. */
  readonly p99: number | null
  readonly max: number
}

/** Latencies by what was asked, from the planned moment to the answer. */
export class Latencies<Series extends string> {
  private readonly samples = new Map<Series, number[]>()
  private readonly failures = new Map<Series, Map<string, number>>()

  /** An answer that came after the time-out is one that nobody waited for. */
  add(series: Series, ms: number): void {
    if (ms >= timeOutMs) this.fail(series, 'later than the time-out')
    else this.keep(series, ms)
  }

  fail(series: Series, reason: string): void {
    this.keep(series, timeOutMs)
    const reasons = this.failures.get(series) ?? new Map<string, number>()
    this.failures.set(series, reasons.set(reason, (reasons.get(reason) ?? 0) + 1))
  }

  summaryOf(series: Series): Summary | null {
    const samples = this.samples.get(series)
    return samples ? summarise(samples, count(this.failures.get(series))) : null
  }

  failuresOf(series: Series): ReadonlyMap<string, number> {
    return this.failures.get(series) ?? new Map()
  }

  /** Every sample there is, for whoever wants another figure than those printed. */
  raw(): Record<string, readonly number[]> {
    return Object.fromEntries(this.samples)
  }

  private keep(series: Series, ms: number): void {
    const samples = this.samples.get(series)
    if (samples) samples.push(ms)
    else this.samples.set(series, [ms])
  }
}

function count(reasons: ReadonlyMap<string, number> | undefined): number {
  return [...(reasons?.values() ?? [])].reduce((sum, each) => sum + each, 0)
}

export function summarise(samples: readonly number[], errors = 0): Summary {
  const sorted = [...samples].sort((one, other) => one - other)
  return {
    count: sorted.length,
    errors,
    p50: percentile(sorted, 0.5),
    p95: percentile(sorted, 0.95),
    p99: sorted.length < samplesForP99 ? null : percentile(sorted, 0.99),
    max: percentile(sorted, 1),
  }
}

/** The smallest sample that at least this share of all do not exceed: always one that was measured. */
export function percentile(sorted: readonly number[], share: number): number {
  const found = sorted[Math.max(0, Math.ceil(share * sorted.length) - 1)]
  if (found === undefined) throw new RangeError('Of no samples there is no percentile.')
  return found
}
