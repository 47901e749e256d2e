import { describe, expect, it } from 'vitest'
import { canonicalJson, chainStart, type AuditFact } from '@/lib/domain/audit-entry'
import { auditActions, describeAuditEntry } from '@/lib/domain/describe-audit-entry'

const words = {
  subjects: new Map([
    ['p-1', 'K47'],
    ['person-1', 'Marit Quillane'],
  ]),
  zone: 'Europe/Lisbon',
}
const deadline = { at: '2027-03-14T17:00:00Z', zone: 'Europe/Lisbon', localTime: '2027-03-14T17:00' }
const digest = 'abcdef0123456789'

function told(
  fact: AuditFact,
  who: { actor: string; actorId: string | null; actorRole: string } = {
    actor: 'Ines Vardal',
    actorId: 'i',
    actorRole: 'coordinator',
  },
): string {
  const { action, version, ...details } = fact
  const entry = {
    studyId: 's',
    sequence: 1,
    at: '2027-03-01T10:00:00.000Z',
    action,
    version,
    body: canonicalJson(details),
    previousHash: chainStart,
    hash: chainStart,
  }
  return describeAuditEntry({ ...entry, ...who }, words)
}

const sentences: [AuditFact, string][] = [
  [
    { action: 'organisation.created', version: 1, name: 'Committee' },
    'founded the organisation “Committee”.',
  ],
  [
    { action: 'member.added', version: 1, personId: 'person-1', role: 'coordinator' },
    'added a person as coordinator.',
  ],
  [
    { action: 'study.created', version: 1, shortName: 'HC-27', title: 'Twine' },
    'opened the draft HC-27, “Twine”.',
  ],
  [
    {
      action: 'study.planned',
      version: 1,
      before: { title: 'A', zone: 'UTC', materials: [{ materialId: 'm', name: 'sisal', description: '' }] },
      after: { title: 'B', zone: 'UTC', materials: [{ description: '', name: 'sisal' }] },
    },
    'changed the plan: title.',
  ],
  [
    { action: 'study.planned', version: 1, before: { title: 'A' }, after: { title: 'A' } },
    'changed the plan without altering it.',
  ],
  [{ action: 'study.opened', version: 1, invitations: 1 }, 'sent 1 invitation and opened the study.'],
  [
    { action: 'study.closed', version: 1, reason: null, returned: 9, expected: 12 },
    'closed the study with 9 of 12 returned.',
  ],
  [
    { action: 'study.closed', version: 1, reason: 'All agreed.', returned: 9, expected: 12 },
    'closed the study with 9 of 12 returned: “All agreed”.',
  ],
  [{ action: 'study.reopened', version: 1, reason: 'Two asked.' }, 'reopened the study: “Two asked”.'],
  [{ action: 'study.sent-to-review', version: 1, analysisId: 'a' }, 'put the study before its committee.'],
  [
    { action: 'study.taken-back', version: 1, reason: 'A cell.' },
    'took the study back from its committee: “A cell”.',
  ],
  [
    {
      action: 'deadline.set',
      version: 1,
      before: deadline,
      after: { ...deadline, at: '2027-04-01T16:00:00Z' },
    },
    'moved the deadline from 14 Mar 2027, 17:00 in Lisbon (UTC+0) to 1 Apr 2027, 17:00 in Lisbon (UTC+1).',
  ],
  [{ action: 'laboratory.invited', version: 1, invitationId: 'v' }, 'put a laboratory on the list.'],
  [
    { action: 'laboratory.re-sent', version: 1, invitationId: 'v', link: 2 },
    'had a laboratory’s link sent again (link 2).',
  ],
  [
    { action: 'laboratory.corrected', version: 1, invitationId: 'v', link: null },
    'corrected the contact of an invited laboratory.',
  ],
  [
    { action: 'laboratory.corrected', version: 1, invitationId: 'v', link: 2 },
    'corrected the contact of an invited laboratory (link 2 was sent).',
  ],
  [{ action: 'laboratory.accepted', version: 1, invitationId: 'v' }, 'accepted and drew its code.'],
  [{ action: 'laboratory.declined', version: 1, invitationId: 'v' }, 'declined.'],
  [{ action: 'extension.requested', version: 1, participantId: 'p-1' }, 'asked for more time.'],
  [
    {
      action: 'extension.granted',
      version: 1,
      participantId: 'p-1',
      dueAt: '2027-03-18T17:00:00Z',
      reason: 'Calibration.',
    },
    'gave laboratory K47 time until 18 Mar 2027, 17:00: “Calibration”.',
  ],
  [
    { action: 'committee.appointed', version: 1, personId: 'person-1', role: 'chair' },
    'appointed Marit Quillane to the committee as chair.',
  ],
  [{ action: 'committee.dismissed', version: 1, personId: 'gone' }, 'dismissed a person from the committee.'],
  [{ action: 'key.read', version: 1, codes: 12 }, 'read which laboratory is which (12 codes).'],
  [
    { action: 'upload.received', version: 1, participantId: 'p-1', uploadId: 'u', sha256: digest },
    'sent a file to be checked (SHA-256 abcdef012345…).',
  ],
  [
    {
      action: 'return.submitted',
      version: 1,
      participantId: 'p-1',
      returnId: 'r',
      number: 2,
      results: 60,
      bodyDigest: digest,
    },
    'returned 60 results, version 2 (digest abcdef012345…).',
  ],
  [
    {
      action: 'cell.excluded',
      version: 1,
      exclusionId: 'e',
      participantId: 'p-1',
      measurandId: 'm',
      materialId: 't',
      reason: 'Grips slipped.',
    },
    'set a cell of laboratory K47 aside: “Grips slipped”.',
  ],
  [
    { action: 'cell.taken-back', version: 1, exclusionId: 'e', reason: 'They had not.' },
    'took a cell back in: “They had not”.',
  ],
  [{ action: 'analysis.requested', version: 1, number: 2 }, 'had analysis 2 computed.'],
  [
    { action: 'analysis.made', version: 1, analysisId: 'a', number: 2, digest, engineVersion: '0.1.0' },
    'made analysis 2 with engine 0.1.0 (digest abcdef012345…).',
  ],
  [
    { action: 'publication.proposed', version: 1, proposalId: 'q', analysisId: 'a', digest },
    'proposed publication (digest abcdef012345…).',
  ],
  [
    { action: 'publication.proposal-withdrawn', version: 1, proposalId: 'q', reason: 'Too soon.' },
    'withdrew the proposal: “Too soon”.',
  ],
  [
    { action: 'publication.confirmed', version: 1, proposalId: 'q', digest, slug: 'hc-27' },
    'confirmed publication as “hc-27” (digest abcdef012345…).',
  ],
]

describe('an entry of the trail, told', () => {
  it.each(sentences)('%# as a sentence', (fact, sentence) => {
    expect(told(fact)).toBe(`Ines Vardal ${sentence}`)
  })

  it('covers every action here that the product can record', () => {
    expect([...new Set(sentences.map(([{ action }]) => action))].sort()).toEqual([...auditActions].sort())
  })

  it('tells a contact by the code of its laboratory, or as a laboratory', () => {
    const contact = { actor: 'a laboratory', actorId: 'c', actorRole: 'contact' }
    expect(told({ action: 'extension.requested', version: 1, participantId: 'p-1' }, contact)).toBe(
      'Laboratory K47 asked for more time.',
    )
    expect(told({ action: 'extension.requested', version: 1, participantId: 'p-2' }, contact)).toBe(
      'A laboratory asked for more time.',
    )
  })

  it('tells who acts without a name by what it is', () => {
    const invited = { actor: 'invited laboratory', actorId: null, actorRole: 'invited laboratory' }
    expect(told({ action: 'laboratory.declined', version: 1, invitationId: 'v' }, invited)).toBe(
      'An invited laboratory declined.',
    )
    expect(
      told(
        { action: 'analysis.requested', version: 1, number: 1 },
        { actor: 'server', actorId: null, actorRole: 'server' },
      ),
    ).toBe('The server had analysis 1 computed.')
  })

  it('still tells an action that a later version of the product recorded', () => {
    expect(told({ action: 'kit.sent', version: 1 } as unknown as AuditFact)).toBe(
      'Ines Vardal did what is recorded as “kit.sent”.',
    )
  })
})
