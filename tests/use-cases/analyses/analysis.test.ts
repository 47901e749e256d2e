import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { findLatestAnalysis } from '@/db/queries/analyses'
import { listAuditEntries } from '@/db/queries/audit'
import { readLayout } from '@/db/queries/studies'
import { analyseNow, codeOf, finishAnalysis } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import { NotFound } from '@/lib/domain/errors'
import { excludeCell, takeCellBack } from '@/lib/use-cases/analyses/exclude-cell'
import { makeAnalysis } from '@/lib/use-cases/analyses/make-analysis'
import { requestAnalysis } from '@/lib/use-cases/analyses/request-analysis'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { sendToReview } from '@/lib/use-cases/reviews/send-to-review'
import { chair, contacts, observer, scrutinisedStudy } from '../../support/scrutinised-study'
import { createTestWorld, type TestWorld } from '../../support/test-world'

let world: TestWorld
let studyId: string
let cell: { studyId: string; code: string; measurandId: string; materialId: string }

beforeAll(async () => {
  world = await createTestWorld({ now: '2027-03-01T09:00:00Z' })
  studyId = (await scrutinisedStudy(world)).studyId
  const layout = await readLayout(world.database.app, studyId)
  cell = {
    studyId,
    code: await codeOf(world, { contact: contacts[0]!, studyId }),
    measurandId: layout.measurands[0]!.measurandId,
    materialId: layout.materials[1]!.materialId,
  }
})
afterAll(() => world.destroy())

async function review(address: string) {
  const { actor } = await world.as(address)
  return readReview({ reader: world.database.reader, actor }, { studyId })
}

describe('an analysis', () => {
  it('is the same bytes for the same input, made again and under another number', async () => {
    const first = await findLatestAnalysis(world.database.app, studyId)
    await analyseNow(world, { coordinator: world.coordinator, studyId })
    const second = await findLatestAnalysis(world.database.app, studyId)
    expect(second?.number).toBe((first?.number ?? 0) + 1)
    expect(second?.digest).toBe(first?.digest)
  })

  it('is made once however often its job runs', async () => {
    const latest = await findLatestAnalysis(world.database.app, studyId)
    await Promise.all([1, 2, 3].map(() => makeAnalysis(world.system, { studyId, number: latest!.number })))
    const { rows } = await sql<{
      count: number
    }>`select count(*)::int as count from analysis where study_id = ${studyId} and number = ${latest!.number}`.execute(
      world.database.app,
    )
    expect(rows).toEqual([{ count: 1 }])
  })

  it('is asked for by a coordinator alone', async () => {
    for (const address of [chair, observer, contacts[0]!])
      await expect(requestAnalysis(await world.as(address), { studyId })).rejects.toThrow(NotFound)
  })

  it('is unchangeable in the database', async () => {
    for (const statement of [
      'update analysis set digest = digest',
      'delete from analysis',
      'update analysis_document set document = document',
    ])
      await expect(sql.raw(statement).execute(world.database.app)).rejects.toThrow(/permission denied/)
  })
})

describe('setting a cell aside', () => {
  it('needs a written reason, in the use case and in the database', async () => {
    const context = await world.as(world.coordinator)
    await expect(excludeCell(context, { ...cell, reason: 'odd' })).rejects.toMatchObject({
      code: 'reason-needed',
      field: 'reason',
    })
    await expect(
      sql`insert into exclusion (study_id, participant_id, measurand_id, material_id, reason, decided_by)
        select study_id, participant_id, ${cell.measurandId}, ${cell.materialId}, 'odd', ${context.actor.personId}
        from participant where study_id = ${studyId} limit 1`.execute(world.database.app),
    ).rejects.toMatchObject({ constraint: 'exclusion_reason_length' })
  })

  it('refuses a reason that would name a laboratory', async () => {
    const context = await world.as(world.coordinator)
    const reason = `The grips slipped, as ${laboratories[0]!.laboratory.toUpperCase()} confirmed.`
    await expect(excludeCell(context, { ...cell, reason })).rejects.toMatchObject({
      code: 'names-a-laboratory',
      field: 'reason',
    })
  })

  it('leaves the values on record and out of the figures, and can be taken back', async () => {
    const context = await world.as(world.coordinator)
    const before = (await review(world.coordinator)).analysis!.measurands[0]!.document
    await excludeCell(context, { ...cell, reason: 'The grips slipped in two of three tests.' })
    await finishAnalysis(world, studyId)
    const after = (await review(world.coordinator)).analysis!.measurands[0]!
    expect(after.document.input).toMatchObject({ excluded: 3, results: before.input.results - 3 })
    expect(after.document.materials[1]?.laboratories).toBe(3)
    expect(after.csv).toContain('set aside')
    expect(after.exclusions).toMatchObject([
      { code: cell.code, reason: 'The grips slipped in two of three tests.' },
    ])
    await expect(
      excludeCell(context, { ...cell, reason: 'The grips slipped in two of three tests.' }),
    ).rejects.toMatchObject({ code: 'already-excluded' })

    await takeCellBack(context, { ...cell, reason: 'The grips had held, as a photograph shows.' })
    await finishAnalysis(world, studyId)
    const again = (await review(world.coordinator)).analysis!.measurands[0]!
    expect(again.document.materials).toEqual(before.materials)
    const entries = await listAuditEntries(world.database.app, studyId)
    expect(
      entries
        .filter(({ action }) => action.startsWith('cell.'))
        .map(({ action, actorRole }) => [action, actorRole]),
    ).toEqual([
      ['cell.excluded', 'administrator'],
      ['cell.taken-back', 'administrator'],
    ])
  })

  it('is no right of a committee or a laboratory', async () => {
    for (const address of [chair, contacts[0]!])
      await expect(
        excludeCell(await world.as(address), { ...cell, reason: 'The grips slipped in two tests.' }),
      ).rejects.toThrow(NotFound)
  })
})

describe('the committee', () => {
  it('sees nothing before the study is put before it, and codes alone after', async () => {
    expect((await review(observer)).analysis).toBeNull()
    await sendToReview(await world.as(world.coordinator), { studyId })
    const seen = await review(observer)
    expect(seen.analysis?.measurands).toHaveLength(1)
    const text = JSON.stringify(seen).toLowerCase()
    for (const { laboratory, city, contactName, address } of laboratories.slice(0, 4))
      for (const word of [laboratory, city, contactName, address])
        expect(text).not.toContain(word.toLowerCase())
  })

  it('is closed to a laboratory of the study and to a stranger', async () => {
    await expect(review(contacts[0]!)).rejects.toThrow(NotFound)
    await expect(readReview({ reader: world.database.reader, actor: null }, { studyId })).rejects.toThrow(
      NotFound,
    )
  })
})
