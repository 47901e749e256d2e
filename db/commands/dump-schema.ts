import { writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { schemaSource } from './schema-source'
import { withMigratedDatabase } from './with-migrated-database'

const target = fileURLToPath(new URL('../schema.sql', import.meta.url))
writeFileSync(target, await withMigratedDatabase(schemaSource))
console.log('Wrote db/schema.sql.')
