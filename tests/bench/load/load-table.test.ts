import { describe, expect, it } from 'vitest'
import { summarise } from './latencies'
import { drawJudged, drawSummaries, judgeMost, judgePercentile, showMiB } from './load-table'

const few = summarise([10, 20, 30])
const many = summarise(Array.from({ length: 5_000 }, (_, index) => index / 10))

describe('a target beside what was measured', () => {
  it('is held at its very limit and missed above it', () => {
    expect(judgePercentile({ figure: 'Draft', summary: few, share: 'p50', mostMs: 20 }).verdict).toBe('held')
    expect(judgePercentile({ figure: 'Draft', summary: few, share: 'p50', mostMs: 19 }).verdict).toBe(
      'missed',
    )
  })

  it('is not told where the samples are too few for it', () => {
    expect(judgePercentile({ figure: 'Draft', summary: few, share: 'p99', mostMs: 500 })).toEqual({
      figure: 'Draft',
      target: 'p99 ≤ 500 ms',
      measured: '3 samples, 5,000 needed',
      verdict: 'not told',
    })
  })

  it('is not told of what was never asked, whatever the share', () => {
    const { verdict } = judgePercentile({ figure: 'File', summary: null, share: 'p50', mostMs: 500 })
    expect(verdict).toBe('not told')
  })

  it('is shown in its own unit', () => {
    expect(judgeMost({ figure: 'Memory', value: 2 ** 30, most: 2 ** 29, show: showMiB })).toEqual({
      figure: 'Memory',
      target: '≤ 512 MiB',
      measured: '1024 MiB',
      verdict: 'missed',
    })
  })
})

describe('the table', () => {
  it('prints no 99th percentile of few samples, and marks their 95th', () => {
    expect(
      drawSummaries([
        ['drafts', many],
        ['files', few],
        ['none', null],
      ]),
    ).toEqual([
      'asked   count     p50     p95      p99     max  errors',
      '------  -----  ------  ------  -------  ------  ------',
      'drafts  5,000  250 ms  475 ms   495 ms  500 ms       0',
      'files       3   20 ms  ~30 ms  too few   30 ms       0',
      'none        0       -       -        -       -       -',
    ])
  })

  it('keeps figure, target, measure and verdict in line', () => {
    const lines = drawJudged([
      judgePercentile({ figure: 'Sheet', summary: many, share: 'p95', mostMs: 400 }),
      judgePercentile({ figure: 'Draft kept', summary: many, share: 'p99', mostMs: 500 }),
    ])
    expect(lines.slice(2)).toEqual([
      'Sheet       p95 ≤ 400 ms  475 ms    missed',
      'Draft kept  p99 ≤ 500 ms  495 ms    held',
    ])
  })
})
