import { sql, type Kysely } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { DB } from '@/db/tables'
import { openTestStudy, type OpenStudy } from '@/tests/use-cases/returns/one-open-study'

let study: OpenStudy
beforeAll(async () => {
  study = await openTestStudy()
})
afterAll(() => study?.world.destroy())

const attacks = {
  'rewrites an entry': sql`update audit.entry set body = '{}' where sequence = 1`,
  'rewrites nothing, to see whether it may': sql`update audit.entry set body = body where false`,
  'deletes an entry': sql`delete from audit.entry where sequence = 1`,
  'empties the trail': sql`truncate audit.entry`,
  'drops the trail': sql`drop table audit.entry`,
  'takes the guard off': sql`alter table audit.entry disable trigger all`,
  'forgets a chain': sql`delete from audit.chain`,
  'empties the chains': sql`truncate audit.chain`,
} as const

async function entries(): Promise<unknown[]> {
  return study.world.database.owner
    .selectFrom('audit.entry')
    .selectAll()
    .orderBy('study_id')
    .orderBy('sequence')
    .execute()
}

async function refusalOf(db: Kysely<DB>, attack: keyof typeof attacks): Promise<string> {
  return attacks[attack].execute(db).then(
    () => 'was done',
    (error: Error & { code?: string }) => error.code ?? error.message,
  )
}

describe('A-34: the audit trail', () => {
  it.each(Object.keys(attacks) as (keyof typeof attacks)[])(
    'is out of reach of web, worker and reader when one of them %s',
    async (attack) => {
      const before = await entries()
      expect(before.length).toBeGreaterThan(2)
      for (const login of ['app', 'reader'] as const) {
        const { [login]: db } = study.world.database
        // 42501 is insufficient_privilege, 25006 read_only_sql_transaction (PostgreSQL manual, appendix A).
        expect(['42501', '25006'], login).toContain(await refusalOf(db, attack))
      }
      expect(await entries()).toEqual(before)
    },
  )

  it.each(['rewrites an entry', 'deletes an entry', 'empties the trail'] as const)(
    'is guarded even against its owner, who by slip %s',
    async (attack) => {
      const before = await entries()
      const refused = sql`${attacks[attack]}`.execute(study.world.database.owner)
      await expect(refused).rejects.toThrow('audit entries are never changed')
      expect(await entries()).toEqual(before)
    },
  )

  it('is not even read by the reader', async () => {
    await expect(
      study.world.database.reader.selectFrom('audit.entry').selectAll().execute(),
    ).rejects.toMatchObject({ code: '42501' })
    await expect(
      study.world.database.reader.selectFrom('audit.chain').selectAll().execute(),
    ).rejects.toMatchObject({ code: '42501' })
  })
})
