import { describe, expect, it } from 'vitest'
import { Refusal } from '@/lib/domain/errors'
import {
  describeState,
  requireState,
  requireStep,
  studyStates,
  type StudyState,
} from '@/lib/domain/study-states'

// The course as the product's description has it: forward one step, back from "closed" and from the committee.
const allowed = new Set([
  'draft>open',
  'open>closed',
  'closed>open',
  'closed>in-review',
  'in-review>closed',
  'in-review>published',
])
const pairs = studyStates.flatMap((from) =>
  studyStates.map((to) => ({ from, to, may: allowed.has(`${from}>${to}`) })),
)

describe('the course of a study', () => {
  it.each(pairs)('$from to $to is a step: $may', ({ from, to, may }) => {
    const step = () => requireStep(from, to)
    if (may) expect(step).not.toThrow()
    else expect(step).toThrow(expect.objectContaining({ code: 'wrong-state' }))
  })

  it('leads nowhere from "published"', () => {
    for (const to of studyStates) expect(() => requireStep('published', to)).toThrow(Refusal)
  })

  it('says in the refusal where the study stands', () => {
    expect(() => requireStep('draft', 'published')).toThrow(/The study is still a draft/)
    expect(() => requireState('in-review', 'draft', 'open')).toThrow(/The study is before its committee/)
  })

  it('lets pass what is in one of the states named', () => {
    expect(() => requireState('open', 'draft', 'open')).not.toThrow()
  })

  it.each(studyStates.map((state) => [state]))('has words for %s', (state: StudyState) => {
    expect(describeState(state)).toMatch(/^is /)
  })
})
