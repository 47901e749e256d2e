import { describe, expect, it } from 'vitest'
import { readAnalyseOptions } from '@/lib/commands/analyse-options'

const planOf = (text: string) => readAnalyseOptions(['--plan', text]).options?.settings.plan
const problemsOf = (text: string) => readAnalyseOptions(['--plan', text]).problems

describe('a plan on the command line', () => {
  it('is one-way as ever', () => {
    expect(planOf('p=8..30,n=2,gamma=2')).toEqual({ from: 8, to: 30, n: 2, gamma: 2 })
    expect(planOf('p = 8, n = 1, gamma = 1.5')).toEqual({ from: 8, to: 8, n: 1, gamma: 1.5 })
    expect(problemsOf('p=1,n=2,gamma=2')).toEqual([
      'option --plan: found "p=1,n=2,gamma=2", expected p=8..30,n=2,gamma=2 with p from 2, n from 1 and gamma from 1',
    ])
  })

  it('takes inner levels with their shares, outermost first', () => {
    expect(planOf('p=8..30,day=2,n=2,gamma=2,share=0.4')).toEqual({
      from: 8,
      to: 30,
      n: 2,
      gamma: 2,
      inner: [{ source: 'day', groups: 2, share: 0.4 }],
    })
    expect(planOf('p=8, Test operator = 3, day=2, n=1, gamma=1, share=.4:0, within=0.3')).toEqual({
      from: 8,
      to: 8,
      n: 1,
      gamma: 1,
      inner: [
        { source: 'Test operator', groups: 3, share: 0.4 },
        { source: 'day', groups: 2, share: 0 },
      ],
      wished: 0.3,
    })
  })

  it.each([
    ['no share', 'p=8,day=2,n=2,gamma=2', 'expected share=0.4, what day holds of gamma² − 1'],
    ['a share too few', 'p=8,op=2,day=2,n=2,gamma=2,share=0.4', 'expected share=0.2:0.2, what op, day holds'],
    ['shares beyond the whole', 'p=8,op=2,day=2,n=2,gamma=2,share=0.8:0.3', 'found "share=0.8:0.3"'],
    ['a share that is no number', 'p=8,day=2,n=2,gamma=2,share=half', 'found "share=half"'],
    ['shares and no level', 'p=8,n=2,gamma=2,share=0.4', 'expected an inner level and its groups'],
    ['a wish and no level', 'p=8,n=2,gamma=2,within=0.3', 'expected an inner level and its groups'],
    ['a level of one group', 'p=8,day=1,n=2,gamma=2,share=0.4', 'found "day=1", expected an inner level'],
    ['a level without its groups', 'p=8,day,n=2,gamma=2,share=0.4', 'found "day", expected an inner level'],
    ['a level twice', 'p=8,day=2,day=2,n=2,gamma=2,share=0.4:0.1', 'found "day=2", expected each level once'],
    ['a level named for the replicate', 'p=8,Replicate=2,n=2,gamma=2,share=0.4', 'inner levels only'],
    ['a figure twice', 'p=8,day=2,n=2,n=3,gamma=2,share=0.4', 'found "n=3", expected n once'],
    ['no number of laboratories', 'day=2,n=2,gamma=2,share=0.4', 'expected p=8..30, from 2 to 1000'],
    ['too many laboratories', 'p=8..1001,day=2,n=2,gamma=2,share=0.4', 'found "p=8..1001"'],
    ['no replicate', 'p=8,day=2,n=0,gamma=2,share=0.4', 'found "n=0"'],
    ['part of a replicate', 'p=8,day=2,n=1.5,gamma=2,share=0.4', 'found "n=1.5"'],
    ['a gamma below 1', 'p=8,day=2,n=2,gamma=0.5,share=0.4', 'found "gamma=0.5", expected gamma=2'],
    ['a wish for nothing', 'p=8,day=2,n=2,gamma=2,share=0.4,within=0', 'found "within=0"'],
    ['too much work', 'p=8,day=1000,n=1000,gamma=2,share=0.4', 'expected 100000 results of each laboratory'],
  ])('is refused in words: %s', (_, text, words) => {
    expect(planOf(text)).toBeUndefined()
    expect(problemsOf(text).join('\n')).toContain(words)
  })

  it('has a line for each thing that is wrong', () => {
    expect(problemsOf('p=1,day=1,n=0,gamma=0,share=2,within=x')).toHaveLength(6)
  })
})
