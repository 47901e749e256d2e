import { migrateDatabase } from '@/db/commands/migrate-database'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from './cluster-access'
import { prepareDatabase } from './cluster-roles'
import type { Ports } from './kept-values'
import { PRODUCT_DATABASE } from './private-cluster'
import { seedDemonstration } from './seed-demonstration'

interface PrivateRun {
  access: ClusterAccess
  ports: Ports
  secret: string
  database?: string
}

/** What web and worker are told where nothing outside was named: everything on loopback, nothing of the owner's. */
export function privateEnvironment({ access, ports, secret, database = PRODUCT_DATABASE }: PrivateRun) {
  return {
    DATABASE_URL: clusterUrl(access, 'app', database),
    DATABASE_READER_URL: clusterUrl(access, 'reader', database),
    // Not 127.0.0.1: the framework rewrites that to localhost, where the session's cookie would be missing.
    BASE_URL: `http://localhost:${ports.web}`,
    AUTH_SECRET: secret,
    SMTP_URL: `smtp://127.0.0.1:${ports.mailRelay}`,
    MAIL_FROM: 'Evenlot <studies@evenlot.example>',
    PORT: String(ports.web),
  }
}

/** Migrates the private database and, once in its life, fills it with the demonstration world. */
export async function preparePrivateDatabase(
  { access, database = PRODUCT_DATABASE, ...run }: PrivateRun,
  say: (line: string) => void,
): Promise<void> {
  const ownerUrl = clusterUrl(access, 'owner', database)
  if (await isSeeded(access, database)) {
    await migrateDatabase(ownerUrl)
    return
  }
  // A first start that was cut short left half a world behind; no person has worked in it yet.
  await asClusterAdmin(access, async (client) => {
    await client.query(`drop database if exists "${database}" with (force)`)
    await prepareDatabase(client, database)
  })
  await migrateDatabase(ownerUrl)
  say('Filling the database with the demonstration studies')
  const environment = privateEnvironment({ access, database, ...run })
  await seedDemonstration({ ownerUrl, environment })
  await asClusterAdmin(access, (client) => client.query(`comment on database "${database}" is '${SEEDED}'`))
}

const SEEDED = 'Holds the whole demonstration world.'

async function isSeeded(access: ClusterAccess, database: string): Promise<boolean> {
  const { rows } = await asClusterAdmin(access, (client) =>
    client.query<{ remark: string | null }>(
      "select shobj_description(oid, 'pg_database') as remark from pg_database where datname = $1",
      [database],
    ),
  )
  return rows[0]?.remark === SEEDED
}
