import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { canonicalJson, chainStart, findBreak, hashEntry, type AuditEntry } from '@/lib/domain/audit-entry'

const studyId = '00000000-0000-4000-8000-00000000000c'

function chainOf(length: number): AuditEntry[] {
  const entries: AuditEntry[] = []
  for (let sequence = 1; sequence <= length; sequence += 1) {
    const entry = {
      studyId,
      sequence,
      at: `2027-03-0${sequence}T10:00:00.000Z`,
      actorId: null,
      actorRole: 'server',
      action: 'study.reopened',
      version: 1,
      body: canonicalJson({ reason: `the reason number ${sequence}` }),
      previousHash: entries.at(-1)?.hash ?? chainStart,
    }
    entries.push({ ...entry, hash: hashEntry(entry) })
  }
  return entries
}

const headOf = (entries: readonly AuditEntry[]) => ({
  sequence: entries.length,
  hash: entries.at(-1)?.hash ?? chainStart,
})

describe('canonical JSON', () => {
  it('is the same for the same value however its keys came', () => {
    expect(canonicalJson({ b: 1, a: [true, null, { d: 'x', c: undefined }] })).toBe(
      '{"a":[true,null,{"d":"x"}],"b":1}',
    )
  })
})

describe('a chain', () => {
  const entries = chainOf(5)
  const head = headOf(entries)

  it('holds when nothing was touched, and when it is empty', () => {
    expect(findBreak(entries, head)).toBeNull()
    expect(findBreak([], null)).toBeNull()
  })

  // The digest computed here by the description alone: previous hash, then the fields as canonical JSON.
  it('is SHA-256 over the previous hash and every field', () => {
    const [, second] = entries
    if (!second) throw new Error('no second entry')
    const fields = `["${studyId}",2,"2027-03-02T10:00:00.000Z",null,"server","study.reopened",1,${JSON.stringify(second.body)}]`
    expect(second.hash).toBe(createHash('sha256').update(`${second.previousHash}${fields}`).digest('hex'))
  })

  it.each(['studyId', 'at', 'actorId', 'actorRole', 'action', 'version', 'body'] as const)(
    'breaks at an entry whose %s was changed',
    (field) => {
      const changed = entries.map((entry) =>
        entry.sequence === 3 ? { ...entry, [field]: field === 'version' ? 2 : `${entry[field]}x` } : entry,
      )
      expect(findBreak(changed, head)).toEqual({ sequence: 3, reason: 'entry 3 was changed' })
    },
  )

  it('breaks at an entry that was written anew with a right digest', () => {
    const third = entries[2]
    if (!third) throw new Error('no third entry')
    const forged = { ...third, body: canonicalJson({ reason: 'another reason altogether' }) }
    const changed = entries.map((entry) =>
      entry.sequence === 3 ? { ...forged, hash: hashEntry(forged) } : entry,
    )
    expect(findBreak(changed, head)).toEqual({
      sequence: 4,
      reason: 'entry 4 does not follow the one before it',
    })
  })

  it('breaks where an entry is missing', () => {
    expect(
      findBreak(
        entries.filter(({ sequence }) => sequence !== 3),
        head,
      ),
    ).toEqual({ sequence: 3, reason: 'entry 3 is missing' })
    expect(findBreak(entries.slice(1), head)).toEqual({ sequence: 1, reason: 'entry 1 is missing' })
  })

  it('breaks where the tail was cut, by what the head remembers', () => {
    expect(findBreak(entries.slice(0, 3), head)).toEqual({
      sequence: 4,
      reason: 'the chain once reached entry 5, and entries after 3 are missing',
    })
    expect(findBreak([], head)).toMatchObject({ sequence: 1 })
  })

  it('breaks where an entry was added past the end, however right its digest', () => {
    const added = chainOf(6)
    expect(findBreak(added, head)).toEqual({
      sequence: 6,
      reason: 'entry 6 was added past the end of the chain',
    })
  })

  it('breaks where the last entry was written anew, since the head remembers another', () => {
    const last = entries.at(-1)
    if (!last) throw new Error('no last entry')
    const forged = { ...last, body: canonicalJson({ reason: 'another end' }) }
    expect(findBreak([...entries.slice(0, -1), { ...forged, hash: hashEntry(forged) }], head)).toEqual({
      sequence: 5,
      reason: 'entry 5 is not the one the chain ended with',
    })
  })

  it('breaks where two entries changed places', () => {
    const [a, b, c, d, e] = entries
    if (!a || !b || !c || !d || !e) throw new Error('too short')
    const swapped = [a, { ...c, sequence: 2 }, { ...b, sequence: 3 }, d, e]
    expect(findBreak(swapped, head)).toMatchObject({ sequence: 2 })
  })
})
