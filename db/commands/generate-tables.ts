import { fileURLToPath } from 'node:url'
import { writeFileSync } from 'node:fs'
import { tablesSource } from './tables-source'
import { withMigratedDatabase } from './with-migrated-database'

const target = fileURLToPath(new URL('../tables.ts', import.meta.url))
writeFileSync(target, await withMigratedDatabase(tablesSource))
console.log('Wrote db/tables.ts.')
