import { sql } from 'kysely'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { laboratories } from '@/db/seed/twine-people'
import { findParticipation } from '@/db/queries/participations'
import { NotFound } from '@/lib/domain/errors'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { readParticipation, readSheet } from '@/lib/use-cases/returns/read-participation'
import { readReceipt } from '@/lib/use-cases/returns/read-receipt'
import { saveDraft } from '@/lib/use-cases/returns/save-draft'
import { submitReturn, type Submission } from '@/lib/use-cases/returns/submit-return'
import { due, entriesOf, makeStudy, opened, openTestStudy, type OpenStudy } from './one-open-study'

let study: OpenStudy
beforeAll(async () => {
  study = await openTestStudy()
})
afterAll(() => study?.world.destroy())
beforeEach(() => study.world.database.setClock(opened))

const complete = ['412.6', '413,10', '<0.5', '398']

function submission(change: Partial<Submission> = {}): Submission {
  return {
    studyId: study.studyId,
    submissionKey: 'one form',
    entries: entriesOf(study.keys, complete),
    remark: '',
    ...change,
  }
}

/** A study in which nothing was returned yet, for tests that count. */
async function freshStudy(): Promise<void> {
  await study.world.destroy()
  study = await openTestStudy()
}

describe('a return', () => {
  beforeAll(freshStudy)

  it('is one return for fifty posts of one form at once, and all get the same receipt', async () => {
    const context = await study.world.as(study.contact)
    const outcomes = await Promise.all(Array.from({ length: 50 }, () => submitReturn(context, submission())))
    const receipts = new Set(
      outcomes.map(
        (outcome) => outcome.outcome === 'received' && `${outcome.number} ${outcome.receiptNumber}`,
      ),
    )
    expect(receipts.size).toBe(1)
    expect(outcomes.filter((outcome) => outcome.outcome === 'received' && !outcome.repeated)).toHaveLength(1)
    const { rows } =
      await sql`select count(*)::int as returns from result_return where study_id = ${study.studyId}`.execute(
        study.world.database.app,
      )
    expect(rows).toEqual([{ returns: 1 }])
  })

  it('keeps what was typed beside what was read, marks of a limit too', async () => {
    const { rows } = await sql`
      select value::text, censored, text from test_result
      join vault.reported_text using (study_id, return_id, measurand_id, material_id, place)
      join material using (study_id, material_id)
      where study_id = ${study.studyId} order by position, place`.execute(study.world.database.owner)
    expect(rows).toEqual([
      { value: '412.6', censored: null, text: '412.6' },
      { value: '413.10', censored: null, text: '413,10' },
      { value: '0.5', censored: '<', text: '<0.5' },
      { value: '398', censored: null, text: '398' },
    ])
  })

  it('writes one audit entry, with the facts and nothing that names anybody', async () => {
    const { rows } = await sql<{ body: string; actor_role: string }>`
      select body::text, actor_role from audit.entry where study_id = ${study.studyId} and action = 'return.submitted'`.execute(
      study.world.database.owner,
    )
    expect(rows).toHaveLength(1)
    const context = await study.world.as(study.contact)
    const { receipt } = await readReceipt(context, { studyId: study.studyId, number: 1 })
    const participation = await findParticipation(study.world.system.db, {
      studyId: study.studyId,
      personId: context.actor.personId,
    })
    expect(rows[0]?.actor_role).toBe('contact')
    expect(JSON.parse(rows[0]!.body)).toEqual({
      participantId: participation!.participantId,
      returnId: receipt.returnId,
      number: 1,
      results: 4,
      bodyDigest: receipt.bodyDigest,
    })
  })

  it('queues the mail of its receipt once, to the contact', async () => {
    const { rows } =
      await sql`select recipient from vault.mail where kind = 'receipt' and study_id = ${study.studyId}`.execute(
        study.world.database.owner,
      )
    expect(rows).toEqual([{ recipient: study.contact }])
  })

  it('refuses the same form with other values, naming the receipt it has', async () => {
    const context = await study.world.as(study.contact)
    const { receipt } = await readReceipt(context, { studyId: study.studyId, number: 1 })
    const other = submission({ entries: entriesOf(study.keys, ['412.7', '413,10', '<0.5', '398']) })
    await expect(submitReturn(context, other)).rejects.toMatchObject({
      code: 'key-reused',
      publicMessage: expect.stringContaining(receipt.receiptNumber),
    })
  })

  it('can be replaced by a later one, which then counts', async () => {
    const context = await study.world.as(study.contact)
    const { submissionKey } = await readSheet(context, { studyId: study.studyId })
    const entries = entriesOf(study.keys, ['412.7', '413,10', '<0.5', '398'])
    expect(await submitReturn(context, submission({ submissionKey, entries }))).toMatchObject({
      outcome: 'received',
      number: 2,
    })
    const { receipts } = await readParticipation(context, { studyId: study.studyId })
    expect(receipts.map(({ number }) => number)).toEqual([2, 1])
  })

  it('has one key on every page that follows the same return', async () => {
    const context = await study.world.as(study.contact)
    const [one, two] = [
      await readSheet(context, { studyId: study.studyId }),
      await readSheet(context, { studyId: study.studyId }),
    ]
    expect(one.submissionKey).toBe(two.submissionKey)
    expect(one.submissionKey).not.toBe('one form')
  })
})

describe('time', () => {
  beforeAll(freshStudy)
  afterEach(() => void vi.useRealTimers())

  it('is the database’s: a clock of the server that runs a year ahead changes nothing', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2028-03-15T00:00:00Z') })
    const context = await study.world.as(study.contact)
    expect(await submitReturn(context, submission({ submissionKey: 'ahead' }))).toMatchObject({
      outcome: 'received',
    })
  })

  it('still takes a return in the last instant', async () => {
    await study.world.database.setClock(due)
    const context = await study.world.as(study.contact)
    expect(await submitReturn(context, submission({ submissionKey: 'last instant' }))).toMatchObject({
      outcome: 'received',
    })
  })

  it('refuses politely one millisecond later, in the laboratory’s own time, and keeps the draft', async () => {
    const context = await study.world.as(study.contact)
    await saveDraft(context, {
      studyId: study.studyId,
      entries: entriesOf(study.keys, ['1']),
      remark: 'half done',
      seenVersion: 0,
    })
    await study.world.database.setClock('2027-03-14T17:00:00.001Z')
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-01-01T00:00:00Z') })
    const { zone } = await readParticipation(context, { studyId: study.studyId })
    await expect(submitReturn(context, submission({ submissionKey: 'too late' }))).rejects.toMatchObject({
      code: 'after-deadline',
      publicMessage: expect.stringContaining(`in ${zone.split('/').at(-1)!.replaceAll('_', ' ')} (UTC`),
    })
    const { draft, receipts, whyNot } = await readParticipation(context, { studyId: study.studyId })
    expect(draft).toMatchObject({ remark: 'half done', entries: { [study.keys[0]!]: '1' } })
    expect([receipts.length, whyNot]).toEqual([2, 'after-deadline'])
  })

  it('gives the receipt of a return that was made in time, however late it is asked for again', async () => {
    await study.world.database.setClock('2027-03-20T00:00:00Z')
    const context = await study.world.as(study.contact)
    expect(await submitReturn(context, submission({ submissionKey: 'last instant' }))).toMatchObject({
      outcome: 'received',
      repeated: true,
    })
  })
})

describe('what is missing', () => {
  beforeAll(freshStudy)

  it('needs a remark, and the refusal says how many', async () => {
    const context = await study.world.as(study.contact)
    const entries = entriesOf(study.keys, ['412.6', '', '398'])
    await expect(submitReturn(context, submission({ submissionKey: 'gaps', entries }))).rejects.toMatchObject(
      {
        code: 'gaps-unexplained',
        field: 'remark',
        publicMessage: expect.stringContaining('2 of 4'),
      },
    )
    const remark = 'Two specimens broke while they were clamped.'
    expect(await submitReturn(context, submission({ submissionKey: 'gaps', entries, remark }))).toMatchObject(
      { outcome: 'received' },
    )
    expect((await readReceipt(context, { studyId: study.studyId, number: 1 })).rows).toHaveLength(2)
  })

  it('is everything when nothing was entered', async () => {
    const context = await study.world.as(study.contact)
    await expect(
      submitReturn(context, submission({ submissionKey: 'nothing', entries: {} })),
    ).rejects.toMatchObject({ code: 'nothing-entered' })
  })

  it('is not made up for a value that cannot be read: every such place is named and nothing stored', async () => {
    const context = await study.world.as(study.contact)
    const entries = entriesOf(study.keys, ['abc', '1,234', '=1+1', '5'])
    const outcome = await submitReturn(context, submission({ submissionKey: 'faulty', entries }))
    expect(outcome).toMatchObject({
      outcome: 'problems',
      problems: [
        { key: study.keys[0] },
        { key: study.keys[1], readings: ['1.234', '1234'] },
        { key: study.keys[2] },
      ],
    })
    expect((await readParticipation(context, { studyId: study.studyId })).receipts).toHaveLength(1)
  })
})

describe('whoever does not act for a laboratory of the study', () => {
  beforeAll(freshStudy)

  const refusalOf = (attempt: Promise<unknown>) =>
    attempt.then(
      () => 'no refusal',
      (error: unknown) => error,
    )

  it('is told the same of a study as of one that does not exist', async () => {
    const strange = await makeStudy(study.world, 'NT-02')
    const coordinator = await study.world.as(study.world.coordinator)
    const missing = '00000000-0000-4000-8000-ffffffffffff'
    const uninvited = laboratories[0]!.address
    const context = await study.world.as(uninvited)
    const withoutStudy = { ...context, actor: { ...context.actor, laboratories: [] } }
    const ofThis = await refusalOf(submitReturn(withoutStudy, submission({ studyId: strange.studyId })))
    const ofNone = await refusalOf(submitReturn(withoutStudy, submission({ studyId: missing })))
    expect(ofThis).toBeInstanceOf(NotFound)
    expect(ofThis).toEqual(ofNone)
    const ofCoordinator = await refusalOf(submitReturn(coordinator, submission()))
    expect(ofCoordinator).toBeInstanceOf(NotFound)
  })

  it('sees no receipt of another laboratory, nor its draft', async () => {
    const context = await study.world.as(study.contact)
    await submitReturn(context, submission({ submissionKey: 'mine' }))
    const other = await study.world.as(study.other)
    const ofTheirs = await refusalOf(readReceipt(other, { studyId: study.studyId, number: 1 }))
    const ofNone = await refusalOf(readReceipt(other, { studyId: study.studyId, number: 99 }))
    expect(ofTheirs).toBeInstanceOf(NotFound)
    expect(ofTheirs).toEqual(ofNone)
    expect((await readParticipation(other, { studyId: study.studyId })).receipts).toEqual([])
  })

  it('shares no key with it: the same key of two laboratories is two returns', async () => {
    const other = await study.world.as(study.other)
    expect(await submitReturn(other, submission({ submissionKey: 'mine' }))).toMatchObject({
      outcome: 'received',
      number: 1,
      repeated: false,
    })
  })
})

describe('fields that are not the laboratory’s to set', () => {
  beforeAll(freshStudy)

  it('are ignored, in the rows as in the trail', async () => {
    const context = await study.world.as(study.contact)
    const bait = {
      role: 'coordinator',
      excluded: true,
      code: 'Z99',
      receivedAt: '2020-01-01',
      number: 7,
      participantId: study.studyId,
    }
    const entries = JSON.parse(
      JSON.stringify(entriesOf(study.keys, complete)).replace(
        /^\{/,
        '{"__proto__":"5","constructor":"6","nowhere|nowhere|1":"7",',
      ),
    ) as Record<string, string>
    await submitReturn(context, { ...submission({ submissionKey: 'bait', entries }), ...bait } as Submission)
    const { receipt, rows, view } = await readReceipt(context, { studyId: study.studyId, number: 1 })
    expect(rows).toHaveLength(4)
    expect(receipt.receivedAt).toEqual(new Date(opened))
    expect(view.code).not.toBe('Z99')
    const { rows: entry } = await sql<{ body: string; actor_role: string }>`
      select body::text, actor_role from audit.entry where study_id = ${study.studyId} and action = 'return.submitted'`.execute(
      study.world.database.owner,
    )
    expect(entry[0]?.actor_role).toBe('contact')
    expect(Object.keys(JSON.parse(entry[0]!.body)).sort()).toEqual([
      'bodyDigest',
      'number',
      'participantId',
      'results',
      'returnId',
    ])
  })
})

describe('a study that was closed', () => {
  beforeAll(freshStudy)

  it('takes no return, in words that say what can be done', async () => {
    const context = await study.world.as(study.contact)
    await submitReturn(context, submission({ submissionKey: 'before' }))
    await closeStudy(await study.world.as(study.world.coordinator), {
      studyId: study.studyId,
      reason: 'All laboratories have returned.',
    })
    await expect(submitReturn(context, submission({ submissionKey: 'after' }))).rejects.toMatchObject({
      code: 'not-open',
      publicMessage: expect.stringContaining('Ask the coordinator'),
    })
  })
})
