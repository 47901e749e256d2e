// @vitest-environment jsdom
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { ForeseenPrecision } from '@/app/(work)/studies/[studyId]/plan/foreseen-precision'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { parseMarkup } from './parse-markup'

function pageOf(levels: { name: string; count: number }[], query: Record<string, string> = {}, invited = 13) {
  const view = {
    layout: { measurands: [], materials: [], levels },
    counts: { invited, accepted: 0, declined: 1, returned: 0, committee: 0 },
    study: { studyId: '00000000-0000-4000-8000-000000000001' },
  } as unknown as StudyView
  return parseMarkup(renderToStaticMarkup(<ForeseenPrecision view={view} query={query} />)).body
}

const textOf = (page: Element) => page.textContent!.replaceAll('\u00a0', ' ')
const nested = [
  { name: 'day', count: 2 },
  { name: 'replicate', count: 2 },
]

describe('what a plan will know, on its screen', () => {
  it('says how many laboratories each figure needs, and what the twelve that have not declined will do', () => {
    const items = Array.from(pageOf(nested).querySelectorAll('li'), textOf)
    expect(items).toHaveLength(4)
    expect(items[0]).toMatch(/^Repeatability, sr, to ±30 %: you need p ≥ \d+ laboratories\.$/)
    expect(items[1]).toMatch(/^Intermediate precision, sI with day varying, to ±30 %: you need p ≥ \d+/)
    expect(items[2]).toMatch(/^Reproducibility, sR, to ±30 %: you need p ≥ \d+/)
    expect(items[3]).toMatch(
      /^With the 12 laboratories that are named and have not declined: repeatability ±\d+ %, day varying ±\d+ %, reproducibility/,
    )
  })

  it('says what was assumed', () => {
    const words = textOf(pageOf(nested, { ratio: '3', 'share.0': '40' }))
    expect(words).toContain('the reproducibility standard deviation is 3 times that of repeatability')
    expect(words).toContain(
      'Of the variance beyond repeatability, 40 % lies between days and 60 % between laboratories.',
    )
    expect(words).toContain('From 10\u202f000 simulated studies of each size')
    const oneWay = textOf(pageOf([{ name: 'replicate', count: 2 }], { ratio: '1' }))
    expect(oneWay).toContain('standard deviation is no larger than that of repeatability')
    expect(oneWay).toContain('From the formulas of ISO 5725-1. With the two so near, the formulas make')
  })

  it('draws a curve for each figure and lists the same figures in a table', () => {
    const page = pageOf(nested)
    expect(page.querySelectorAll('polyline')).toHaveLength(3)
    const heads = Array.from(page.querySelectorAll('thead th'), textOf)
    expect(heads).toEqual(['Laboratories', 'repeatability', 'day varying', 'reproducibility'])
    expect(page.querySelectorAll('tbody tr')).toHaveLength(27)
    // Repeatability on 8 × 2 × (2 − 1) degrees of freedom: (√(28.845/16) − √(6.908/16))/2 = 0.343, by tables of chi-squared.
    const eight = page.querySelectorAll('tbody tr')[4]!
    expect(Array.from(eight.children, textOf).slice(0, 2)).toEqual(['8', '34'])
  })

  it('asks for the assumptions in a form that keeps nothing, and says what it could not use', () => {
    const page = pageOf(nested, { ratio: 'many', within: '25' })
    const form = page.querySelector('form')!
    expect(form.getAttribute('method')).toBe('get')
    const names = Array.from(form.querySelectorAll('input'), (input) => [input.name, input.defaultValue])
    expect(names).toEqual([
      ['ratio', 'many'],
      ['share.0', '50'],
      ['within', '25'],
    ])
    expect(form.querySelector('input')!.getAttribute('aria-invalid')).toBe('true')
    expect(textOf(form)).toContain('Give a number from 1 to 100; until then 2 is assumed.')
    expect(textOf(page)).toContain('to ±25 %')
  })

  it('is the same each time it is read', () => {
    expect(pageOf(nested).innerHTML).toBe(pageOf(nested).innerHTML)
  })

  it('says nothing of laboratories expected where there are none', () => {
    expect(textOf(pageOf(nested, {}, 1))).not.toContain('declined')
  })
})
