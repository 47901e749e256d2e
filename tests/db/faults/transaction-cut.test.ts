import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { draftStudy, invitationToken, layoutOf, planWith } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import type { Context } from '@/lib/context'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { receiveUpload } from '@/lib/use-cases/returns/receive-upload'
import { submitReturn } from '@/lib/use-cases/returns/submit-return'
import { openStudy } from '@/lib/use-cases/studies/open-study'
import { entriesOf, makeStudy, openTestStudy, type OpenStudy } from '@/tests/use-cases/returns/one-open-study'
import { openDyingDatabase, type Death } from './dying-database'

let study: OpenStudy
beforeAll(async () => {
  study = await openTestStudy()
})
afterAll(() => study?.world.destroy())

type Counts = Readonly<Record<string, number>>

/** Every row of the database by table, the queue's too, as its owner sees them. */
async function countRows(): Promise<Counts> {
  const { owner } = study.world.database
  const { rows: tables } = await sql<{ name: string }>`
    select format('%I.%I', nspname, relname) as name from pg_class join pg_namespace on pg_namespace.oid = relnamespace
    where relkind in ('r', 'p') and not relispartition and nspname in ('public', 'vault', 'audit', 'pgboss')
    order by 1`.execute(owner)
  const counted = tables.map(({ name }) => `select '${name}' as name, count(*)::int as rows from ${name}`)
  const { rows } = await sql<{ name: string; rows: number }>`${sql.raw(counted.join(' union all '))}`.execute(
    owner,
  )
  return Object.fromEntries(rows.map((row) => [row.name, row.rows]))
}

function added(before: Counts, after: Counts): Counts {
  return Object.fromEntries(
    Object.entries(after).flatMap(([name, rows]) =>
      rows === before[name] ? [] : [[name, rows - (before[name] ?? 0)]],
    ),
  )
}

type Change = (context: Context) => Promise<unknown>

/** Runs the change with a connection that dies as told; says whether the caller was told it was done. */
async function attempt(address: string, change: Change, death: Death) {
  const dying = openDyingDatabase(study.world.database.urls.app, death)
  try {
    const context = await study.world.as(address)
    const error = await change({ ...context, db: dying.db }).then(
      () => null,
      (caught: unknown) => caught,
    )
    return { error, statements: dying.statements().length }
  } finally {
    await dying.destroy()
  }
}

interface Case {
  readonly what: string
  /** Made afresh for each of the two halves of the test. */
  readonly prepare: () => Promise<{ who: string; change: Change }>
  readonly adds: Counts
}

let forms = 0

const cases: Case[] = [
  {
    what: 'a return: rows, audit entry, receipt mail and its job',
    prepare: async () => {
      const submissionKey = `cut ${(forms += 1)}`
      const entries = entriesOf(study.keys, ['412.6', '413.10', '<0.5', '398'])
      return {
        who: study.contact,
        change: (context) =>
          submitReturn(context, { studyId: study.studyId, submissionKey, entries, remark: '' }),
      }
    },
    adds: {
      'public.result_return': 1,
      'public.test_result': 4,
      'vault.receipt': 1,
      'vault.reported_text': 4,
      'audit.entry': 1,
      'vault.mail': 1,
      'pgboss.job': 1,
    },
  },
  {
    what: 'a file that was sent: its bytes, its check, audit entry and job',
    prepare: async () => ({
      who: study.contact,
      change: (context) =>
        receiveUpload(context, {
          studyId: study.studyId,
          fileName: 'results.csv',
          bytes: Buffer.from('a;b\n1;2\n'),
        }),
    }),
    adds: { 'vault.upload': 1, 'vault.upload_check': 1, 'audit.entry': 1, 'pgboss.job': 1 },
  },
  {
    what: 'an answer to an invitation: code, contact, identity and audit entry',
    prepare: async () => {
      const made = await draftStudy(study.world, {
        coordinator: study.world.coordinator,
        plan: planWith({ shortName: `NT-9${(forms += 1)}` }),
        laboratories: laboratories.slice(0, 2),
      })
      await openStudy(await study.world.as(study.world.coordinator), { studyId: made.studyId })
      const place = { studyId: made.studyId, invitationId: made.invitationIds[0] ?? '' }
      const token = await invitationToken(study.world, place)
      return {
        who: study.world.coordinator,
        change: (context) => answerInvitation(context, { token, answer: 'accepted' }),
      }
    },
    adds: {
      'public.participant': 1,
      'vault.contact': 1,
      'vault.identity': 1,
      'vault.invitation_answer': 1,
      'audit.entry': 1,
    },
  },
  {
    what: 'the sending of all invitations: state, links, mails, jobs and audit entry',
    prepare: async () => {
      const { studyId } = await draftStudy(study.world, {
        coordinator: study.world.coordinator,
        plan: planWith({ shortName: `NT-8${(forms += 1)}` }),
        laboratories: laboratories.slice(0, 2),
      })
      return { who: study.world.coordinator, change: (context) => openStudy(context, { studyId }) }
    },
    adds: {
      'public.study_state': 1,
      'vault.invitation_link': 2,
      'vault.mail': 2,
      'pgboss.job': 2,
      'audit.entry': 1,
    },
  },
]

describe('F-02: a process killed between any two statements leaves all of the change or nothing', () => {
  it.each(cases)('$what', async ({ prepare, adds }) => {
    const { who, change } = await prepare()
    const before = await countRows()
    let deaths = 0
    for (;;) {
      const { error, statements } = await attempt(who, change, { beforeStatement: deaths + 1 })
      if (error === null) break
      deaths += 1
      expect(statements, 'it died where it was told to').toBe(deaths)
      expect(added(before, await countRows()), `killed before statement ${deaths}`).toEqual({})
    }
    // The loop ends with the first try that outlived its last statement.
    expect(deaths).toBeGreaterThan(Object.keys(adds).length)
    expect(added(before, await countRows())).toEqual(adds)

    const again = await prepare()
    const next = await countRows()
    const unanswered = await attempt(again.who, again.change, 'after-commit')
    expect(unanswered.error).toMatchObject({ message: 'the process is gone' })
    expect(added(next, await countRows()), 'killed after its commit').toEqual(adds)
  })

  it('and a return whose answer was lost is found again by its key, not stored twice', async () => {
    const { studyId } = await makeStudy(study.world, 'NT-77')
    const places = listPlaces(await layoutOf(study.world, { studyId, shortName: 'NT-77' }))
    const entries = Object.fromEntries(places.map((place) => [placeKey(place), '5']))
    const submission = { studyId, submissionKey: 'lost answer', entries, remark: '' }
    const change: Change = (context) => submitReturn(context, submission)
    const lost = await attempt(study.contact, change, 'after-commit')
    expect(lost.error).toMatchObject({ message: 'the process is gone' })
    const before = await countRows()
    const found = await submitReturn(await study.world.as(study.contact), submission)
    expect(found).toMatchObject({ outcome: 'received', number: 1, repeated: true })
    expect(added(before, await countRows())).toEqual({})
  })
})
