import { migrateDatabase } from '@/db/commands/migrate-database'
import { readStartConfig } from '@/lib/config'
import { Children } from './children'
import { ensureBuild } from './product-build'
import { startProduct } from './product-processes'
import { nextStopSignal, runUntilStopped } from './run-until-stopped'

/** Runs the product for real: no demonstration, no fakes, no person but those its administrator makes. */
export async function startOnOutsideServices(root: string): Promise<number> {
  const { databaseOwnerUrl, ...config } = readStartConfig(process.env)
  const stopRequested = nextStopSignal()
  const say = (line: string) => console.log(line)

  await ensureBuild(root, say)
  const ran = await migrateDatabase(databaseOwnerUrl)
  if (ran.length > 0) say(`Migrated: ${ran.join(', ')}`)

  const children = new Children()
  try {
    await startProduct({ root, children, env: withoutOwner(process.env), port: config.port })
    say(`Evenlot answers on 127.0.0.1:${config.port} for ${config.baseUrl}.`)
    say('The first administrator is made with:')
    say('  npm run create-administrator -- --organisation "…" --name "…" --address …')
    return await runUntilStopped(children, stopRequested)
  } finally {
    await children.stopAll()
  }
}

/** Whoever breaks into web or worker must not find the login that may change the schema. */
function withoutOwner(env: NodeJS.ProcessEnv): Record<string, string> {
  const kept = Object.entries(env).filter(
    ([name, value]) => name !== 'DATABASE_OWNER_URL' && value !== undefined,
  )
  return Object.fromEntries(kept) as Record<string, string>
}
