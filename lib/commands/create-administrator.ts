import { parseArgs } from 'node:util'
import { createDatabase } from '@/db/connection'
import { Refusal } from '@/lib/domain/errors'
import { createAdministrator } from '@/lib/use-cases/people/create-administrator'

const usage =
  'npm run create-administrator -- --organisation "…" --name "…" --address name@organisation.example'

process.exitCode = await run()

async function run(): Promise<number> {
  const wanted = readArguments()
  const url = process.env.DATABASE_URL
  if (!wanted) return fail(`Give all three: ${usage}`)
  if (!url) return fail("DATABASE_URL is not set. Give the database's address with the login app.")
  const db = createDatabase(url, { applicationName: 'evenlot-create-administrator', max: 1 })
  try {
    await createAdministrator({ db }, wanted)
    console.log(`${wanted.name} administers ${wanted.organisation} and can sign in with ${wanted.address}.`)
    return 0
  } catch (error) {
    if (error instanceof Refusal) return fail(error.publicMessage)
    throw error
  } finally {
    await db.destroy()
  }
}

function readArguments(): { organisation: string; name: string; address: string } | null {
  const options = {
    organisation: { type: 'string' },
    name: { type: 'string' },
    address: { type: 'string' },
  } as const
  try {
    const { organisation, name, address } = parseArgs({ options }).values
    return organisation && name && address ? { organisation, name, address } : null
  } catch {
    return null
  }
}

function fail(words: string): number {
  console.error(words)
  return 1
}
