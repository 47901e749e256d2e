import { cpus } from 'node:os'
import { seriesNames, type Series } from './laboratory-requests'
import { summarise, timeOutMs } from './latencies'
import type { LoadFigures } from './load-run'
import {
  drawJudged,
  drawSummaries,
  judgeMost,
  judgePercentile,
  showCount,
  showMiB,
  showMs,
  showSeconds,
  showShare,
  type Judged,
} from './load-table'
import { mostLagMs } from './play-arrivals'

/** Everything that was measured, beside what the service promises of it. */
export function printLoad(figures: LoadFigures, print: (line: string) => void): void {
  const { requests, probedQuiet, probedAnalysing } = figures
  print('')
  const probes = [
    ['health, quiet', summarise(probedQuiet.answers)],
    ['health, analysing', summarise(probedAnalysing.answers)],
  ] as const
  const asked = seriesNames.map((series) => [series, requests.summaryOf(series)] as const)
  for (const line of drawSummaries([...asked, ...probes])) print(line)
  for (const [series] of asked)
    for (const [reason, count] of requests.failuresOf(series))
      print(`  of the errors of "${series}": ${count} ${reason}`)
  print(`~ fewer than 1,000 samples. An error counts as ${showSeconds(timeOutMs)}.`)
  print('')
  for (const line of drawJudged(judged(figures))) print(line)
  print('')
  const shares = Object.entries(figures.use).map(([name, share]) => `${name} ${showShare(share)}`)
  print(`While they arrived, of one core each: ${shares.join(', ')}.`)
  sayWhetherValid(figures, print)
}

export function printHead(
  { seconds, full, seed }: { seconds: number; full: number; seed: number },
  print: (line: string) => void,
): void {
  const cores = cpus().length
  print(`One deadline: ${seconds} s of arrivals at the rates of the full ${full} s, seed ${seed}.`)
  if (seconds < full) print(`A shortened run; \`npm run bench -- load --seconds ${full}\` is the whole.`)
  print(
    `${cores} ${cores === 1 ? 'core' : 'cores'} for web, worker, PostgreSQL, mail and the generator alike; the targets are meant for 4.`,
  )
}

function judged({ requests, ...figures }: LoadFigures): Judged[] {
  const submits = (['submit, acknowledged', 'submit, receipt drawn'] as const).map((series) =>
    requests.summaryOf(series),
  )
  const { invitations, analysis, probedAnalysing, memory } = figures
  const told = (figure: string, series: Series, share: 'p50' | 'p95' | 'p99', mostMs: number) =>
    judgePercentile({ figure, summary: requests.summaryOf(series), share, mostMs })
  return [
    told('Submit acknowledged', 'submit, acknowledged', 'p50', 150),
    told('Submit acknowledged', 'submit, acknowledged', 'p95', 500),
    told('Submit acknowledged', 'submit, acknowledged', 'p99', 1500),
    told('Submit with its receipt drawn', 'submit, receipt drawn', 'p95', 500),
    judgeMost({
      figure: 'Errors on submit',
      value: submits.reduce((sum, each) => sum + (each?.errors ?? 0), 0),
      most: 0,
      show: showCount,
    }),
    told('Sheet page, first byte', 'sheet, first byte', 'p95', 400),
    told('Draft kept', 'draft kept', 'p99', 500),
    told('File of 200 rows to preview', 'file to preview', 'p95', 3000),
    {
      ...judgeMost({
        figure: `${showCount(invitations.sent)} invitations to SMTP`,
        value: invitations.ms,
        most: 300_000,
        show: showSeconds,
      }),
      ...(invitations.sent < 500 ? { verdict: 'missed' as const } : {}),
    },
    {
      ...judgeMost({
        figure: `Statistics of ${showCount(analysis.results)} results`,
        value: analysis.ms,
        most: 30_000,
        show: showSeconds,
      }),
      ...(analysis.done ? {} : { verdict: 'missed' as const }),
    },
    judgeMost({
      figure: 'Longest stall of web meanwhile',
      value: Math.max(...probedAnalysing.answers),
      most: 100,
      show: showMs,
    }),
    judgeMost({
      figure: 'Memory of web, started',
      value: memory.started,
      most: 512 * 2 ** 20,
      show: showMiB,
    }),
    judgeMost({ figure: 'Memory of web, warm', value: memory.warm, most: 512 * 2 ** 20, show: showMiB }),
    judgeMost({ figure: 'Memory of web, after', value: memory.after, most: 512 * 2 ** 20, show: showMiB }),
  ]
}

function sayWhetherValid(
  { worstLagMs, arrivals, probedQuiet, probedAnalysing }: LoadFigures,
  print: (line: string) => void,
): void {
  const lag = Math.max(worstLagMs, probedQuiet.worstLagMs, probedAnalysing.worstLagMs)
  print(`${showCount(arrivals)} arrivals, let go at most ${showMs(lag)} after their planned moments.`)
  if (isValid({ worstLagMs, probedQuiet, probedAnalysing })) return
  print(
    `INVALID: the generator fell behind by more than ${showMs(mostLagMs)}. What was measured is the generator too; run it on a quieter machine.`,
  )
}

export function isValid({
  worstLagMs,
  probedQuiet,
  probedAnalysing,
}: Pick<LoadFigures, 'worstLagMs' | 'probedQuiet' | 'probedAnalysing'>): boolean {
  return [worstLagMs, probedQuiet.worstLagMs, probedAnalysing.worstLagMs].every((lag) => lag <= mostLagMs)
}
