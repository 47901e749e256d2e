import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'

let database: TestDatabase
beforeAll(async () => {
  database = await createTestDatabase()
})
afterAll(() => database?.destroy())

describe('the logins', () => {
  it('are none of them a superuser, nor past row security', async () => {
    const { rows } = await sql<{ rolname: string; rolsuper: boolean; rolbypassrls: boolean }>`
      select rolname, rolsuper, rolbypassrls from pg_roles where rolname in ('owner', 'app', 'reader') order by rolname
    `.execute(database.owner)
    expect(rows).toEqual(
      ['app', 'owner', 'reader'].map((rolname) => ({ rolname, rolsuper: false, rolbypassrls: false })),
    )
  })

  it('leave everything in the database to the owner', async () => {
    const { rows } = await sql<{ owners: string[] }>`
      select array_agg(distinct pg_get_userbyid(relowner)::text) as owners
      from pg_class join pg_namespace on pg_namespace.oid = relnamespace
      where nspname in ('public', 'vault', 'audit', 'pgboss')
    `.execute(database.owner)
    expect(rows[0]?.owners).toEqual(['owner'])
  })

  it('give up after their own time limits', async () => {
    const limits = async (login: 'app' | 'reader') => {
      const { rows } = await sql<Record<string, string>>`
        select current_setting('statement_timeout') as statement, current_setting('lock_timeout') as lock,
          current_setting('idle_in_transaction_session_timeout') as idle
      `.execute(database[login])
      return rows[0]
    }
    expect(await limits('app')).toEqual({ statement: '15s', lock: '2s', idle: '15s' })
    expect(await limits('reader')).toEqual({ statement: '5s', lock: '2s', idle: '15s' })
  })

  it('keep the reader from writing, even where it could make a table of its own', async () => {
    await expect(sql`create temporary table stray (n integer)`.execute(database.reader)).rejects.toThrow(
      /permission denied|read-only/,
    )
  })
})

describe('values from the database', () => {
  it('arrive as numbers where they count, and as text where a float would lose digits', async () => {
    const { rows } = await sql`
      select 9007199254740991::int8 as count, 12345678901234.567891::numeric as measured, date '2026-03-01' as day
    `.execute(database.app)
    expect(rows[0]).toEqual({ count: 9007199254740991, measured: '12345678901234.567891', day: '2026-03-01' })
  })

  it('refuse a count that a number cannot hold', async () => {
    await expect(sql`select 9007199254740993::int8 as count`.execute(database.app)).rejects.toThrow(
      '9007199254740993, too large',
    )
  })
})

describe('the clock', () => {
  it('stands where it was set, and runs again when let go', async () => {
    const now = async () => {
      const { rows } = await sql<{ now: Date }>`select clock_now() as now`.execute(database.app)
      return rows[0]!.now
    }
    await database.setClock('2031-05-01T12:00:00.123Z')
    expect(await now()).toEqual(new Date('2031-05-01T12:00:00.123Z'))
    await database.setClock(null)
    expect(Math.abs((await now()).getTime() - Date.now())).toBeLessThan(60_000)
  })
})
