import { describe, expect, it } from 'vitest'
import type { Actor, Role, Target } from '@/lib/domain/actor'
import { NotFound } from '@/lib/domain/errors'
import { authorise, permissions, permittedRole, type Action } from '@/lib/domain/permissions'

const organisationId = '00000000-0000-4000-8000-00000000000a'
const otherOrganisation = '00000000-0000-4000-8000-00000000000b'
const studyId = '00000000-0000-4000-8000-00000000000c'
const otherStudy = '00000000-0000-4000-8000-00000000000d'
const participantId = '00000000-0000-4000-8000-00000000000e'
const otherParticipant = '00000000-0000-4000-8000-00000000000f'
const target: Target = { organisationId, studyId, participantId }

const nobody = {
  personId: 'p',
  name: 'P',
  address: 'p@study.example',
  organisations: [],
  laboratories: [],
  committees: [],
}

/** Someone who has exactly one role, here or elsewhere. */
const holders: Record<Exclude<Role, 'anyone'>, (isHere: boolean) => Actor> = {
  administrator: (isHere) => ({
    ...nobody,
    organisations: [{ organisationId: isHere ? organisationId : otherOrganisation, role: 'administrator' }],
  }),
  coordinator: (isHere) => ({
    ...nobody,
    organisations: [{ organisationId: isHere ? organisationId : otherOrganisation, role: 'coordinator' }],
  }),
  contact: (isHere) => ({
    ...nobody,
    laboratories: [{ studyId: isHere ? studyId : otherStudy, participantId }],
  }),
  chair: (isHere) => ({ ...nobody, committees: [{ studyId: isHere ? studyId : otherStudy, role: 'chair' }] }),
  member: (isHere) => ({
    ...nobody,
    committees: [{ studyId: isHere ? studyId : otherStudy, role: 'member' }],
  }),
  observer: (isHere) => ({
    ...nobody,
    committees: [{ studyId: isHere ? studyId : otherStudy, role: 'observer' }],
  }),
}

// Written out by hand from the product's description, not from the table under test: one row an action, "+" for
// may and "-" for may not, in the order administrator, coordinator, contact, chair, member, observer, anyone.
const expected: Record<Action, string> = {
  'organisation.administer': '+------',
  'study.create': '++-----',
  'study.read': '++-----',
  'study.plan': '++-----',
  'study.open': '++-----',
  'study.close': '++-----',
  'study.review': '++-----',
  'deadline.set': '++-----',
  'laboratory.invite': '++-----',
  'laboratory.extend': '++-----',
  'committee.appoint': '++-----',
  'key.read': '++-----',
  'return.watch': '++-----',
  'return.read': '--+----',
  'return.draft': '--+----',
  'return.upload': '--+----',
  'return.submit': '--+----',
  'extension.request': '--+----',
  'analysis.run': '++-----',
  'cell.exclude': '++-----',
  'review.read': '++-+++-',
  'publication.propose': '++-----',
  'publication.confirm': '++-+---',
  'publication.read': '+++++++',
  'trail.read': '++-----',
}
const order = ['administrator', 'coordinator', 'contact', 'chair', 'member', 'observer'] as const

const rows = Object.entries(expected).flatMap(([action, marks]) =>
  order.map((role, index) => ({ action: action as Action, role, may: marks[index] === '+' })),
)

describe('permissions', () => {
  it('has a row here for every action, so that a new one is decided and not forgotten', () => {
    expect(Object.keys(expected).sort()).toEqual(Object.keys(permissions).sort())
    expect(new Set(Object.values(expected).map((marks) => marks.length))).toEqual(new Set([7]))
  })

  it.each(rows)('$role: $action is allowed: $may', ({ action, role, may }) => {
    const ask = () => authorise(holders[role](true), action, target)
    if (may) expect(ask()).toBe(permissions[action].roles.some((each) => each === 'anyone') ? 'anyone' : role)
    else expect(ask).toThrow(NotFound)
  })

  it.each(rows)('$role elsewhere: $action here is refused unless anyone may', ({ action, role }) => {
    const held = permittedRole(holders[role](false), action, target)
    expect(held).toBe(expected[action].endsWith('+') ? 'anyone' : undefined)
  })

  it.each(Object.entries(expected))('nobody signed in: %s', (action, marks) => {
    expect(permittedRole(null, action as Action, target)).toBe(marks.endsWith('+') ? 'anyone' : undefined)
  })

  it("keeps a contact from another laboratory's returns in the same study", () => {
    const contact = holders.contact(true)
    expect(() => authorise(contact, 'return.read', { ...target, participantId: otherParticipant })).toThrow(
      NotFound,
    )
  })

  it('adds up the roles of one person, and no more', () => {
    const chairAndContact = { ...holders.chair(true), laboratories: holders.contact(true).laboratories }
    expect(permittedRole(chairAndContact, 'publication.confirm', target)).toBe('chair')
    expect(permittedRole(chairAndContact, 'return.submit', target)).toBe('contact')
    expect(permittedRole(chairAndContact, 'key.read', target)).toBeUndefined()
  })

  it('says of each action what it allows, as the end of a sentence', () => {
    for (const { phrase } of Object.values(permissions)) expect(phrase).toMatch(/^[a-z].*[^.]$/)
  })
})
