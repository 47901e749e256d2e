// @vitest-environment jsdom
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { CellMeansPlot } from '@/app/ui/charts/cell-means-plot'
import { ConsistencyPlot } from '@/app/ui/charts/consistency-plot'
import { PrecisionBars } from '@/app/ui/charts/precision-bars'
import { scaleTicks, tickDecimals } from '@/app/ui/charts/scale-ticks'
import { parseMarkup } from './parse-markup'

describe('ConsistencyPlot, drawn on the server', () => {
  const page = parseMarkup(
    renderToStaticMarkup(
      <ConsistencyPlot
        svgId="within"
        statistic="k"
        order="laboratory"
        materials={['sisal', 'hemp']}
        criticals={[{ label: '1 %', value: 2.03 }]}
        laboratories={[
          {
            code: 'A31',
            cells: [
              { material: 'sisal', value: 0.4, beyond: null, note: '' },
              { material: 'hemp', value: 2.31, beyond: '1 %', note: 'Under enquiry.' },
            ],
          },
          { code: 'B05', cells: [{ material: 'sisal', value: 1, beyond: null, note: '' }, null] },
        ]}
      />,
    ),
  )

  it('says each cell in words, with the limit it lies beyond', () => {
    const marks = Array.from(page.querySelectorAll('[data-cell]'), (mark) => mark.getAttribute('aria-label'))
    expect(marks).toEqual([
      'A31, sisal: k = 0.40',
      'A31, hemp: k = 2.31, beyond 1 % (2.03). Under enquiry.',
      'B05, sisal: k = 1.00',
    ])
  })

  it('lets Tab reach one mark, from which the arrow keys go on', () => {
    expect(page.querySelectorAll('[data-cell][tabindex="0"]')).toHaveLength(1)
  })

  it('carries a title and a summary', () => {
    expect(page.querySelector('#within > title')!.textContent).toBe('k, within laboratories')
    expect(page.querySelector('#within > desc')!.textContent).toContain(
      '3 cells of 2 laboratories and 2 materials; 1 beyond',
    )
  })

  it('moves the names of close critical values apart', () => {
    const close = parseMarkup(
      renderToStaticMarkup(
        <ConsistencyPlot
          svgId="close"
          statistic="h"
          order="laboratory"
          materials={[]}
          laboratories={[]}
          criticals={[
            { label: '5 %', value: 2.4 },
            { label: '1 %', value: 2.5 },
          ]}
        />,
      ),
    )
    const heights = Array.from(close.querySelectorAll('text'))
      .filter((text) => text.textContent!.includes('%'))
      .map((text) => Number(text.getAttribute('y')))
    expect(heights).toHaveLength(4)
    expect(heights[1]! - heights[0]!).toBeGreaterThanOrEqual(13)
    expect(heights[3]! - heights[2]!).toBeGreaterThanOrEqual(13)
  })

  it('names the critical value at the end of its line and labels the mark beyond it', () => {
    const words = Array.from(page.querySelectorAll('#within text'), (text) => text.textContent)
    expect(words).toContain('1 %')
    expect(words).toContain('hemp 2.31')
    expect(words).not.toContain('sisal 0.40')
  })
})

describe('CellMeansPlot', () => {
  it('starts with its curve at the mean of the cell means, and counts the means within it', () => {
    const page = parseMarkup(
      renderToStaticMarkup(
        <CellMeansPlot
          svgId="means"
          material="coir"
          unit="N"
          cells={[
            { code: 'A31', mean: 411.2, sd: 1.1, count: 3 },
            { code: 'B05', mean: 419, sd: null, count: 1, isSetAside: true },
          ]}
          grandMean={412}
          reference={{ scale: 2 / Math.sqrt(3), degreesOfFreedom: 20 }}
          halfWidth={2.4}
          decimals={1}
        />,
      ),
    )
    expect(page.querySelector('output')!.textContent).toBe(
      'at the mean of the cell means, 412.0\u00a0N; 1 of 2 means in the shaded zone',
    )
    expect(page.querySelector('#means')!.innerHTML).toContain(
      'B05: 419.0\u00a0N one result; set aside'.replace('\u00a0', '&nbsp;'),
    )
  })
})

describe('PrecisionBars', () => {
  const page = parseMarkup(
    renderToStaticMarkup(
      <PrecisionBars
        svgId="shares"
        groupName="days"
        materials={[
          { name: 'coir', within: 2, betweenGroups: 1, betweenLaboratories: 1 },
          { name: 'flax', within: 0, betweenGroups: 0, betweenLaboratories: 0 },
        ]}
      />,
    ),
  )

  it('says the shares in words', () => {
    expect(page.querySelector('desc')!.textContent).toBe(
      'coir: within 50\u00a0%, between days 25\u00a0%, between laboratories 25\u00a0%. flax: no variance.',
    )
  })

  it('lays the parts of a bar end to end', () => {
    const parts = Array.from(page.querySelectorAll('g > g > rect'))
      .filter((part) => part.getAttribute('height') === '24')
      .map((part) => [Number(part.getAttribute('x')), Number(part.getAttribute('width'))] as const)
    expect(parts).toHaveLength(3)
    expect(parts[1]![0]).toBeCloseTo(parts[0]![0] + parts[0]![1], 6)
    expect(parts[2]![0]).toBeCloseTo(parts[1]![0] + parts[1]![1], 6)
    expect(parts[0]![1]).toBeCloseTo(2 * parts[2]![1], 6)
  })

  it('draws no bar where there is no variance, and no impossible number', () => {
    expect(page.body.innerHTML).not.toMatch(/NaN|Infinity/)
  })
})

describe('scaleTicks', () => {
  it.each([
    [{ low: 0, high: 10, count: 5 }, [0, 2, 4, 6, 8, 10]],
    [{ low: 405.2, high: 424.1, count: 4 }, [410, 415, 420]],
    [{ low: -1, high: 1, count: 4 }, [-1, -0.5, 0, 0.5, 1]],
  ])('covers %o with round values', (range, ticks) => {
    expect(scaleTicks(range)).toEqual(ticks)
  })

  it('gives the one value of a range without extent', () => {
    expect(scaleTicks({ low: 3, high: 3, count: 5 })).toEqual([3])
  })

  it.each([
    [[0, 2], 0],
    [[0, 0.5], 1],
    [[0.02, 0.04], 2],
    [[100, 200], 0],
  ])('asks for no more decimals than tell %j apart', (ticks, decimals) => {
    expect(tickDecimals(ticks)).toBe(decimals)
  })
})
