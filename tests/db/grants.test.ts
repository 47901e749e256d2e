import { sql, type Kysely } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { DB } from '@/db/tables'
import { createTestDatabase, type TestDatabase } from '../support/database'

interface Table {
  readonly schema: string
  readonly name: string
  readonly columns: readonly string[]
}

type Login = 'app' | 'reader'

let database: TestDatabase
let tables: readonly Table[]

beforeAll(async () => {
  database = await createTestDatabase()
  tables = await listTables(database.owner)
})
afterAll(() => database?.destroy())

/** All that the reader may read. Whatever is not here is refused, so that a new column is closed until it is named. */
const readable: Record<string, readonly string[]> = {
  organisation: ['organisation_id', 'name'],
  study: ['study_id', 'organisation_id', 'short_name', 'title', 'method', 'purpose', 'limit_factor'],
  study_state: ['study_id', 'number', 'state'],
  study_deadline: ['study_id', 'number', 'due_at', 'zone', 'local_time'],
  measurand: ['study_id', 'measurand_id', 'position', 'name', 'unit', 'decimals', 'has_true_zero'],
  material: ['study_id', 'material_id', 'position', 'name', 'description'],
  nesting_level: ['study_id', 'position', 'name', 'count'],
  participant: ['study_id', 'participant_id', 'code'],
  result_return: ['study_id', 'return_id', 'participant_id', 'number'],
  test_result: ['study_id', 'return_id', 'measurand_id', 'material_id', 'place', 'value', 'censored'],
  exclusion: ['study_id', 'exclusion_id', 'participant_id', 'measurand_id', 'material_id', 'reason'],
  exclusion_lifted: ['study_id', 'exclusion_id'],
  analysis: ['study_id', 'analysis_id', 'number', 'engine_version', 'settings', 'digest'],
  analysis_document: ['study_id', 'analysis_id', 'measurand_id', 'input_csv', 'input_digest', 'document'],
  publication_proposal: ['study_id', 'proposal_id', 'analysis_id', 'snapshot', 'digest'],
  publication: ['study_id', 'proposal_id', 'slug', 'published_on'],
}

/** What stands once it is written: states, results, decisions, receipts, publications, the trail. */
const unchangeable = [
  'audit.entry',
  'public.analysis',
  'public.analysis_document',
  'public.analysis_request',
  'public.exclusion',
  'public.exclusion_lifted',
  'public.organisation',
  'public.participant',
  'public.publication',
  'public.publication_proposal',
  'public.publication_proposal_withdrawn',
  'public.result_return',
  'public.study_deadline',
  'public.study_state',
  'public.test_result',
  'vault.contact',
  'vault.extension',
  'vault.extension_request',
  'vault.identity',
  'vault.invitation_answer',
  'vault.invitation_link',
  'vault.mail',
  'vault.organisation_member',
  'vault.receipt',
  'vault.reported_text',
  'vault.upload',
]

describe('the reader', () => {
  it('may enter no schema but the one that names nobody', async () => {
    const { rows } = await sql<{ schema: string }>`
      select nspname as schema from pg_namespace
      where has_schema_privilege('reader', oid, 'usage') and nspname !~ '^pg_' and nspname <> 'information_schema'
    `.execute(database.owner)
    expect(rows).toEqual([{ schema: 'public' }])
  })

  it('is refused every table of the vault and of the trail, and all others outside the public schema', async () => {
    const closed = tables.filter(({ schema }) => schema !== 'public')
    expect(new Set(closed.map(({ schema }) => schema))).toEqual(
      new Set(['audit', 'migrations', 'pgboss', 'vault']),
    )
    for (const table of closed)
      expect(await refusal('reader', `select from ${quoted(table)}`), quoted(table)).toMatch(
        /^permission denied for schema/,
      )
  })

  it('may read the named columns of the public schema and no others', async () => {
    const { rows } = await sql<{ name: string; columns: string[] }>`
      select relname as name, array_agg(attname::text order by attnum) as columns
      from pg_attribute join pg_class on pg_class.oid = attrelid
      where relnamespace = 'public'::regnamespace and relkind in ('r', 'p', 'v', 'm', 'f') and attnum > 0 and not attisdropped
        and has_column_privilege('reader', attrelid, attnum, 'select')
      group by relname
    `.execute(database.owner)
    expect(Object.fromEntries(rows.map(({ name, columns }) => [name, columns]))).toEqual(readable)
  })

  it('is refused every other column when it asks for it', async () => {
    for (const { schema, name, columns } of tables.filter((each) => each.schema === 'public'))
      for (const column of columns.filter((each) => !readable[name]?.includes(each)))
        expect(
          await refusal('reader', `select "${column}" from "${schema}"."${name}"`),
          `${name}.${column}`,
        ).toMatch(/^permission denied/)
  })

  it('reads what is named, so that a refusal above is not for want of a table', async () => {
    for (const [name, columns] of Object.entries(readable))
      expect(await refusal('reader', `select ${columns.join(', ')} from ${name}`), name).toBeNull()
  })

  it('sees no time of a return and no person: a deadline is the only instant it may read', async () => {
    const { rows } = await sql<{ place: string }>`
      select relname || '.' || attname as place
      from pg_attribute join pg_class on pg_class.oid = attrelid
      where relnamespace = 'public'::regnamespace and attnum > 0 and not attisdropped
        and has_column_privilege('reader', attrelid, attnum, 'select')
        and (format_type(atttypid, null) ~ '^time' or attname ~ '(_by|_at|person_id|actor_id)$')
    `.execute(database.owner)
    expect(rows).toEqual([{ place: 'study_deadline.due_at' }])
  })

  it('is refused every insert, update, delete and truncation, in a transaction that may write', async () => {
    for (const table of tables) {
      for (const statement of changesOf(table))
        expect(await refusal('reader', statement), statement).toMatch(/^permission denied/)
    }
  })

  it('can set no clock and call nothing that runs with the owner’s rights but the clock', async () => {
    expect(await refusal('reader', 'select set_clock(null, false)')).toMatch(
      /^permission denied for function/,
    )
    const { rows } = await sql<{ name: string }>`
      select proname as name from pg_proc where prosecdef and has_function_privilege('reader', oid, 'execute')
        and pronamespace not in ('pg_catalog'::regnamespace, 'information_schema'::regnamespace)
    `.execute(database.owner)
    expect(rows).toEqual([{ name: 'clock_now' }])
  })
})

describe('the app', () => {
  it('changes nothing of what stands once it is written', async () => {
    for (const name of unchangeable) {
      const table = tables.find((each) => `${each.schema}.${each.name}` === name)
      expect(table, `a table ${name}`).toBeDefined()
      for (const statement of changesOf(table!).filter((each) => !each.startsWith('insert')))
        expect(await refusal('app', statement), statement).toMatch(/^permission denied/)
    }
  })

  it('may truncate nothing of the product', async () => {
    const { rows } = await sql`
      select relname from pg_class where relkind in ('r', 'p') and has_table_privilege('app', oid, 'truncate')
        and relnamespace in ('public'::regnamespace, 'vault'::regnamespace, 'audit'::regnamespace)
    `.execute(database.owner)
    expect(rows).toEqual([])
  })

  it('may change a table of the product only where this test knows of it', async () => {
    const { rows } = await sql<{ name: string }>`
      select nspname || '.' || relname as name
      from pg_class join pg_namespace on pg_namespace.oid = relnamespace
      where relkind in ('r', 'p') and nspname in ('public', 'vault', 'audit')
        and not has_table_privilege('app', pg_class.oid, 'delete') and not has_any_column_privilege('app', pg_class.oid, 'update')
      order by 1
    `.execute(database.owner)
    // The clock's setting is no record: the app may not even read it.
    expect(rows.map(({ name }) => name)).toEqual([...unchangeable, 'public.clock_setting'].sort())
  })

  it('is kept from the trail’s entries by a trigger too, as the owner is', async () => {
    const { rows } = await sql<{ name: string }>`
      select tgname as name from pg_trigger where tgrelid = 'audit.entry'::regclass and not tgisinternal and tgenabled = 'O' order by 1
    `.execute(database.owner)
    expect(rows.map(({ name }) => name)).toEqual(['entry_unchangeable', 'entry_untruncatable'])
    await expect(sql`truncate audit.entry`.execute(database.owner)).rejects.toThrow(
      'audit entries are never changed',
    )
  })
})

describe('the three logins', () => {
  it('hold no attribute and belong to no role that would reach past their grants', async () => {
    const { rows } = await sql`
      select rolname, rolsuper, rolcreaterole, rolcreatedb, rolreplication, rolbypassrls,
        (select count(*)::int from pg_auth_members where member = pg_roles.oid) as memberships
      from pg_roles where rolname in ('owner', 'app', 'reader') order by rolname
    `.execute(database.owner)
    const plain = {
      rolsuper: false,
      rolcreaterole: false,
      rolcreatedb: false,
      rolreplication: false,
      rolbypassrls: false,
      memberships: 0,
    }
    expect(rows).toEqual(['app', 'owner', 'reader'].map((rolname) => ({ rolname, ...plain })))
  })

  it('own nothing but for the owner: no relation, function, type or schema', async () => {
    const { rows } = await sql`
      select 'relation' as kind, relname::text as name from pg_class where relowner in ('app'::regrole, 'reader'::regrole)
      union all select 'function', proname::text from pg_proc where proowner in ('app'::regrole, 'reader'::regrole)
      union all select 'type', typname::text from pg_type where typowner in ('app'::regrole, 'reader'::regrole)
      union all select 'schema', nspname::text from pg_namespace where nspowner in ('app'::regrole, 'reader'::regrole)
      union all select 'database', datname::text from pg_database where datdba in ('app'::regrole, 'reader'::regrole)
    `.execute(database.owner)
    expect(rows).toEqual([])
  })

  it('make nothing, not even a temporary table, but for the owner', async () => {
    const { rows } = await sql`
      select rolname, nspname from pg_roles, pg_namespace
      where rolname in ('app', 'reader') and has_schema_privilege(rolname, nspname, 'create')
    `.execute(database.owner)
    expect(rows).toEqual([])
    for (const login of ['app', 'reader'] as const)
      expect(await refusal(login, 'create temporary table stray (n integer)'), login).toMatch(
        /^permission denied/,
      )
  })

  it('pass nothing on: no grant may be granted further, and none is made in advance', async () => {
    const { rows: onwards } = await sql`
      select table_schema, table_name, grantee from information_schema.role_table_grants
      where grantee in ('app', 'reader') and is_grantable = 'YES'
    `.execute(database.owner)
    expect(onwards).toEqual([])
    const { rows: inAdvance } = await sql`select defaclacl from pg_default_acl`.execute(database.owner)
    expect(inAdvance).toEqual([])
  })
})

/** Every table, view and the like from the catalogue, so that one made tomorrow is held to the same. */
async function listTables(owner: Kysely<DB>): Promise<Table[]> {
  const { rows } = await sql<{ schema: string; name: string; columns: string[] }>`
    select nspname as schema, relname as name, array_agg(attname::text order by attnum) as columns
    from pg_class join pg_namespace on pg_namespace.oid = relnamespace join pg_attribute on attrelid = pg_class.oid
    where relkind in ('r', 'p', 'v', 'm', 'f') and nspname !~ '^pg_' and nspname <> 'information_schema'
      and attnum > 0 and not attisdropped
    group by 1, 2 order by 1, 2
  `.execute(owner)
  return rows
}

function changesOf(table: Table): string[] {
  const column = `"${table.columns[0]}"`
  const name = quoted(table)
  return [
    `insert into ${name} default values`,
    `update ${name} set ${column} = ${column}`,
    `delete from ${name}`,
    `truncate ${name}`,
  ]
}

function quoted({ schema, name }: Table): string {
  return `"${schema}"."${name}"`
}

/** What the database says against a statement, or null where it runs; nothing of it stays. */
async function refusal(login: Login, statement: string): Promise<string | null> {
  class Undone extends Error {}
  try {
    // The reader's transactions only read by default; asked to write, so that its grants alone refuse.
    await database[login]
      .transaction()
      .setAccessMode('read write')
      .execute(async (trx) => {
        await sql.raw(statement).execute(trx)
        throw new Undone()
      })
  } catch (failure) {
    if (failure instanceof Undone) return null
    return (failure as Error).message
  }
  return null
}
