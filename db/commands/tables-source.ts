import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createRequire } from 'node:module'
import { format, resolveConfig } from 'prettier'
import { runProgram } from '@/lib/commands/run-program'

// As db/connection.ts reads them. A numeric is written as text too, so that no float comes between;
// an interval is only ever handled inside the database.
const TYPES = { int8: 'number', date: 'string', numeric: 'string', interval: 'unknown' }

/** The row types of a migrated database, as the text of db/tables.ts. */
export async function tablesSource(ownerUrl: string): Promise<string> {
  const folder = mkdtempSync(join(tmpdir(), 'evenlot-tables-'))
  try {
    const out = join(folder, 'tables.ts')
    const generator = createRequire(import.meta.url).resolve('kysely-codegen/dist/cli/bin.js')
    const schemas = ['--default-schema', 'public', '--include-pattern', '{public,vault,audit}.*']
    const types = ['--type-mapping', JSON.stringify(TYPES)]
    const output = ['--url', ownerUrl, '--out-file', out]
    await runProgram(process.execPath, [generator, '--dialect', 'postgres', ...schemas, ...types, ...output])
    const options = await resolveConfig(process.cwd() + '/db/tables.ts')
    return await format(readFileSync(out, 'utf8'), { ...options, parser: 'typescript' })
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
