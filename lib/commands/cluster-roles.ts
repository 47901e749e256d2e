import type { Client } from 'pg'
import { asClusterAdmin, type ClusterAccess } from './cluster-access'

// A page waits seconds, not minutes: what takes longer belongs to the worker, in small steps.
const ROLE_SETTINGS = {
  owner: {},
  app: { statement_timeout: '15s', lock_timeout: '2s', idle_in_transaction_session_timeout: '15s' },
  reader: {
    statement_timeout: '5s',
    lock_timeout: '2s',
    idle_in_transaction_session_timeout: '15s',
    default_transaction_read_only: 'on',
  },
} as const

/** Makes the three logins of the product, or brings them back to this state: none is more than a plain login. */
export async function prepareRoles(access: ClusterAccess): Promise<void> {
  await asClusterAdmin(access, async (client) => {
    for (const [role, settings] of Object.entries(ROLE_SETTINGS)) {
      const { rowCount } = await client.query('select 1 from pg_roles where rolname = $1', [role])
      if (rowCount === 0) await client.query(`create role "${role}"`)
      const password = access.passwords[role as keyof typeof ROLE_SETTINGS]
      await client.query(
        `alter role "${role}" login nosuperuser nocreatedb nocreaterole noreplication nobypassrls password '${password}'`,
      )
      for (const [name, value] of Object.entries(settings)) {
        await client.query(`alter role "${role}" set ${name} = '${value}'`)
      }
    }
  })
}

/** Makes a database that belongs to the owner and that only the product's logins may enter. */
export async function prepareDatabase(client: Client, name: string, template?: string): Promise<boolean> {
  const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [name])
  if (rowCount === 0) {
    await client.query(`create database "${name}" owner "owner"${template ? ` template "${template}"` : ''}`)
  }
  // Grants on a database are its own: a clone does not inherit them from its template.
  await client.query(`revoke all on database "${name}" from public`)
  await client.query(`grant connect on database "${name}" to "app", "reader"`)
  return rowCount === 0
}
