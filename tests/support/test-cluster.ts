import { createHash } from 'node:crypto'
import { readFileSync, readdirSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { migrateDatabase } from '@/db/commands/migrate-database'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'

const MIGRATIONS = fileURLToPath(new URL('../../migrations', import.meta.url))

// Any number serves, as long as every test process asks for the same one.
const TEMPLATE_LOCK = 7_041_953

/** Clones a database from a migrated template, which the first caller of a run makes. */
export async function cloneMigratedDatabase(access: ClusterAccess, name: string): Promise<void> {
  await asClusterAdmin(access, async (client) => {
    // Cloning needs the template to itself, so making it and cloning it take turns.
    await client.query('select pg_advisory_lock($1)', [TEMPLATE_LOCK])
    try {
      const template = `template_${migrationsDigest()}`
      await ensureTemplate(access, template)
      await prepareDatabase(client, name, template)
    } finally {
      await client.query('select pg_advisory_unlock($1)', [TEMPLATE_LOCK])
    }
  })
}

async function ensureTemplate(access: ClusterAccess, template: string): Promise<void> {
  await asClusterAdmin(access, async (client) => {
    const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [template])
    if (rowCount) return
    // Migrated under another name: a template whose migration failed half-way must not be cloned.
    const unfinished = `${template}_unfinished`
    await client.query(`drop database if exists "${unfinished}" with (force)`)
    await prepareDatabase(client, unfinished)
    await migrateDatabase(clusterUrl(access, 'owner', unfinished))
    await client.query(`alter database "${unfinished}" rename to "${template}"`)
  })
}

function migrationsDigest(): string {
  const digest = createHash('sha256')
  for (const name of readdirSync(MIGRATIONS).sort()) digest.update(readFileSync(`${MIGRATIONS}/${name}`))
  return digest.digest('hex').slice(0, 12)
}
