import { sql } from 'kysely'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { participationOf } from '@/db/queries/participations'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'

let database: TestDatabase
beforeAll(async () => {
  database = await createTestDatabase()
})
afterAll(() => database?.destroy())

it.each(['participant', 'identity'])(
  'finds the %s of a person in a study by its full key, whatever the planner knows of the study',
  async (table) => {
    const plan = await database.owner.transaction().execute(async (trx) => {
      // An empty table would be read through from end to end.
      await sql`set local enable_seqscan = off`.execute(trx)
      const query = participationOf(trx, {
        studyId: '00000000-0000-4000-8000-000000000001',
        personId: '00000000-0000-4000-8000-000000000002',
      })
      return (await query.explain<{ 'QUERY PLAN': string }>()).map((line) => line['QUERY PLAN'])
    })
    const scan = plan.findIndex((line) => line.includes(` on ${table} `))
    // A value that is settled before the tables are joined stands as a numbered parameter.
    expect(plan[scan + 1], plan.join('\n')).toMatch(/Index Cond: .*participant_id = \$\d/)
  },
)
