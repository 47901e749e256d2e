import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { migrateDatabase } from '@/db/commands/migrate-database'
import { schemaSource } from '@/db/commands/schema-source'
import { tablesSource } from '@/db/commands/tables-source'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'

let database: TestDatabase
beforeAll(async () => {
  database = await createTestDatabase()
})
afterAll(() => database?.destroy())

it('db/tables.ts is what the migrations make (npm run generate)', async () => {
  expect(readFileSync('db/tables.ts', 'utf8')).toBe(await tablesSource(database.urls.owner))
})

it('db/schema.sql is what the migrations make (npm run generate)', async () => {
  expect(readFileSync('db/schema.sql', 'utf8')).toBe(await schemaSource(database.urls.owner))
})

it('migrating twice changes nothing', async () => {
  const before = await schemaSource(database.urls.owner)
  expect(await migrateDatabase(database.urls.owner)).toEqual([])
  expect(await schemaSource(database.urls.owner)).toBe(before)
})
