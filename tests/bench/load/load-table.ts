import { samplesForP95, samplesForP99, type Summary } from './latencies'

export interface Judged {
  readonly figure: string
  readonly target: string
  readonly measured: string
  readonly verdict: 'held' | 'missed' | 'not told'
}

/** A percentile beside the most it may be; untold where there are too few samples for it. */
export function judgePercentile({
  figure,
  summary,
  share,
  mostMs,
}: {
  figure: string
  summary: Summary | null
  share: 'p50' | 'p95' | 'p99'
  mostMs: number
}): Judged {
  const target = `${share} ≤ ${showMs(mostMs)}`
  const value = summary?.[share] ?? null
  if (!summary || value === null) {
    const measured = `${showCount(summary?.count ?? 0)} samples, ${showCount(samplesForP99)} needed`
    return { figure, target, measured, verdict: 'not told' }
  }
  return { figure, target, measured: showMs(value), verdict: value <= mostMs ? 'held' : 'missed' }
}

export function judgeMost({
  figure,
  value,
  most,
  show,
}: {
  figure: string
  value: number
  most: number
  show: (value: number) => string
}): Judged {
  return {
    figure,
    target: `≤ ${show(most)}`,
    measured: show(value),
    verdict: value <= most ? 'held' : 'missed',
  }
}

/** One line for each thing that was asked, as it was measured and with nothing left out. */
export function drawSummaries(summaries: readonly (readonly [string, Summary | null])[]): string[] {
  const rows = summaries.map(([name, summary]) =>
    summary === null
      ? [name, '0', '-', '-', '-', '-', '-']
      : [
          name,
          showCount(summary.count),
          showMs(summary.p50),
          `${summary.count < samplesForP95 ? '~' : ''}${showMs(summary.p95)}`,
          summary.p99 === null ? 'too few' : showMs(summary.p99),
          showMs(summary.max),
          showCount(summary.errors),
        ],
  )
  return drawTable(['asked', 'count', 'p50', 'p95', 'p99', 'max', 'errors'], rows)
}

export function drawJudged(rows: readonly Judged[]): string[] {
  return drawTable(
    ['figure', 'target', 'measured', ''],
    rows.map(({ figure, target, measured, verdict }) => [figure, target, measured, verdict]),
    1,
  )
}

/** Columns as wide as they need; those after the first `left` ones hold numbers and stand at the right. */
function drawTable(head: readonly string[], rows: readonly (readonly string[])[], left = 0): string[] {
  const widths = head.map((title, column) =>
    Math.max(title.length, ...rows.map((row) => row[column]?.length ?? 0)),
  )
  const draw = (row: readonly string[]) =>
    row
      .map((text, column) => {
        const width = widths[column] ?? 0
        return column === 0 || left > 0 ? text.padEnd(width) : text.padStart(width)
      })
      .join('  ')
      .trimEnd()
  return [draw(head), draw(widths.map((width) => '-'.repeat(width))), ...rows.map(draw)]
}

export function showMs(ms: number): string {
  return ms < 10 ? `${ms.toFixed(1)} ms` : `${showCount(Math.round(ms))} ms`
}

export function showSeconds(ms: number): string {
  return `${(ms / 1000).toFixed(1)} s`
}

export function showMiB(bytes: number): string {
  return `${Math.round(bytes / 2 ** 20)} MiB`
}

export function showCount(count: number): string {
  return count.toLocaleString('en-GB')
}

export function showShare(share: number): string {
  return `${Math.round(share * 100)} %`
}
