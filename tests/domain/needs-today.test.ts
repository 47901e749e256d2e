import { describe, expect, it } from 'vitest'
import type { Lane } from '@/lib/domain/describe-lane'
import { needsToday, type NeedsFacts } from '@/lib/domain/needs-today'

const lane: Lane & { message: string | null } = {
  code: 'K47',
  state: 'not begun',
  acceptedAt: '2027-01-08T10:00:00.000Z',
  draftSavedAt: null,
  draftEntries: 0,
  returnedAt: null,
  returns: 0,
  results: 0,
  extendedTo: null,
  asksForTime: false,
  message: null,
}
const returned = {
  ...lane,
  code: 'B25',
  state: 'returned' as const,
  returns: 1,
  results: 60,
  returnedAt: '2027-03-01T10:00:00.000Z',
}
const due = '2027-03-14T17:00:00.000Z'

function needsOf({
  now = '2027-03-01T17:00:00.000Z',
  lanes = [lane],
  ...changed
}: Partial<Omit<NeedsFacts, 'now' | 'round'>> & { now?: string; lanes?: (typeof lane)[] } = {}) {
  return needsToday({
    study: { state: 'open', deadline: { dueAt: new Date(due) } },
    counts: { accepted: 1, committee: 3 },
    analysis: null,
    computing: false,
    proposed: false,
    invitations: [],
    ...changed,
    now: new Date(now),
    round: { now, dueAt: due, places: 60, lanes },
  })
}
const said = (...asked: Parameters<typeof needsOf>) =>
  needsOf(...asked).map(({ when, code, words, action }) => [when, code ?? '', words, action.label])
const inState = (state: NeedsFacts['study']['state']) => ({ state, deadline: { dueAt: new Date(due) } })

describe('what needs someone today', () => {
  it('is nothing two weeks before the deadline, when all is well', () => {
    expect(needsOf()).toEqual([])
  })

  it('is a laboratory whose deadline is within two days, by how far its draft has come', () => {
    const now = '2027-03-13T15:00:00.000Z'
    expect(said({ now, lanes: [{ ...lane, draftEntries: 48, state: 'in draft' }] })).toEqual([
      ['Due in 26 hours', 'K47', 'has 48 of 60 values in its draft.', 'Give it more time'],
    ])
    expect(needsOf({ now: '2027-03-12T16:59:00.000Z' })).toEqual([])
  })

  it('is a laboratory that is late, and the close that may follow once others returned', () => {
    const now = '2027-03-16T18:00:00.000Z'
    expect(said({ now, lanes: [{ ...lane, state: 'late' }, returned] })).toEqual([
      ['Due 2 days ago', 'K47', 'has not begun and has not returned.', 'Give it more time'],
      [
        'Deadline passed',
        '',
        '1 of 2 laboratories have returned. Closing freezes the returns for scrutiny.',
        'Close for returns',
      ],
    ])
  })

  it('waits with the close while a laboratory still has the time it was given', () => {
    const extended = { ...lane, extendedTo: '2027-03-20T17:00:00.000Z' }
    expect(needsOf({ now: '2027-03-16T18:00:00.000Z', lanes: [extended, returned] })).toEqual([])
  })

  it('is the close as soon as all have returned', () => {
    expect(said({ lanes: [returned] })[0]).toEqual([
      'All returned',
      '',
      '1 of 1 laboratories have returned. Closing freezes the returns for scrutiny.',
      'Close for returns',
    ])
  })

  it('is an answer to who asks for more time, in its words', () => {
    expect(said({ lanes: [{ ...lane, asksForTime: true, message: 'until Thursday' }] })).toEqual([
      ['Answer needed', 'K47', 'asks for more time: “until Thursday”', 'Answer the request'],
    ])
  })

  it('is mail that was refused, a laboratory that keeps silent, one that declined: counted, never named', () => {
    const invitations = [
      { answer: null, issuedAt: new Date('2027-02-28T09:00:00Z'), isRefused: true },
      { answer: null, issuedAt: new Date('2027-02-20T09:00:00Z'), isRefused: false },
      { answer: 'declined' as const, issuedAt: new Date('2027-02-20T09:00:00Z'), isRefused: false },
      { answer: 'accepted' as const, issuedAt: new Date('2027-02-20T09:00:00Z'), isRefused: true },
    ]
    expect(said({ invitations })).toEqual([
      ['Mail refused', '', '1 invitation was refused by the server of the address.', 'Correct the address'],
      ['No answer yet', '', '1 laboratory has not answered for more than a week.', 'Send the link again'],
      ['Declined', '', '1 laboratory declined. Another can still be invited.', 'Invite another'],
    ])
  })

  it('puts what is overdue before what is due, and that before what can wait', () => {
    const invitations = [{ answer: 'declined' as const, issuedAt: null, isRefused: false }]
    const lanes = [
      { ...lane, asksForTime: true },
      { ...lane, code: 'L22', state: 'late' as const, extendedTo: null },
    ]
    expect(needsOf({ lanes, invitations, now: '2027-03-14T16:00:00.000Z' }).map(({ tone }) => tone)).toEqual([
      'danger',
      'warn',
      'info',
    ])
  })

  it('of a draft is to name two laboratories, then to send', () => {
    const named = { answer: null, issuedAt: null, isRefused: false }
    const study = inState('draft')
    expect(needsOf({ study, invitations: [] })[0]?.action.label).toBe('Name the laboratories')
    expect(needsOf({ study, invitations: [named] })[0]?.words).toMatch(/two or more/)
    expect(needsOf({ study, invitations: [named, named] })[0]?.action.label).toBe('Send the invitations')
  })

  it.each([
    [{ analysis: null }, 'Have it computed'],
    [{ analysis: { number: 2, upToDate: false } }, 'Have it computed again'],
    [{ analysis: { number: 2, upToDate: true } }, 'Put it before the committee'],
    [
      { analysis: { number: 2, upToDate: true }, counts: { accepted: 1, committee: 0 } },
      'Appoint the committee',
    ],
    [{ analysis: null, computing: true }, undefined],
  ])('of a closed study with %j is “%s”', (changed, label) => {
    expect(needsOf({ study: inState('closed'), lanes: [returned], ...changed })[0]?.action.label).toBe(label)
  })

  it('before the committee is the proposal, then its confirmation, and after publication nothing', () => {
    expect(needsOf({ study: inState('in-review') })[0]?.action.label).toBe('Propose publication')
    expect(needsOf({ study: inState('in-review'), proposed: true })[0]?.action.label).toBe('See the proposal')
    expect(needsOf({ study: inState('published') })).toEqual([])
  })
})
