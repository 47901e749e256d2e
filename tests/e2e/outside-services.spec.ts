import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { expect, test } from '@playwright/test'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'
import { freePort } from '@/lib/commands/free-port'

const access = JSON.parse(process.env.TEST_CLUSTER ?? 'null') as ClusterAccess
const DATABASE = 'outside'

test('a start on outside services makes up nobody, and leaves with everything it started', async () => {
  await asClusterAdmin(access, (client) => prepareDatabase(client, DATABASE))
  const port = await freePort()
  const start = spawn(process.execPath, ['lib/commands/start.mjs'], {
    env: {
      NODE_ENV: 'production',
      PATH: process.env.PATH,
      HOME: process.env.HOME,
      DATABASE_URL: clusterUrl(access, 'app', DATABASE),
      DATABASE_OWNER_URL: clusterUrl(access, 'owner', DATABASE),
      DATABASE_READER_URL: clusterUrl(access, 'reader', DATABASE),
      BASE_URL: `http://localhost:${port}`,
      AUTH_SECRET: 'a secret for this test alone, long enough',
      SMTP_URL: 'smtp://127.0.0.1:9',
      MAIL_FROM: 'Studies <studies@evenlot.example>',
      PORT: String(port),
    },
  })
  let said = ''
  start.stdout.on('data', (chunk: Buffer) => (said += chunk.toString()))
  start.stderr.on('data', (chunk: Buffer) => (said += chunk.toString()))
  const ended = once(start, 'exit')

  await expect.poll(() => said, { timeout: 60_000 }).toContain('npm run create-administrator')
  expect((await fetch(`http://127.0.0.1:${port}/sign-in`)).status).toBe(200)
  // The name of an invented person or of the fake mailbox would stand in what it said.
  expect(said).not.toMatch(/\.example|mail +http/)

  const { rows } = await asClusterAdmin(
    access,
    (client) =>
      client.query(`
        select (select count(*)::int from vault."User") as people, (select count(*)::int from organisation) as organisations,
          (select count(*)::int from study) as studies, (select count(*)::int from vault.laboratory) as laboratories`),
    DATABASE,
  )
  expect(rows).toEqual([{ people: 0, organisations: 0, studies: 0, laboratories: 0 }])

  start.kill('SIGTERM')
  expect(await ended).toEqual([0, null])
  await expect(fetch(`http://127.0.0.1:${port}/sign-in`)).rejects.toThrow()
  const { rows: left } = await asClusterAdmin(access, (client) =>
    client.query('select application_name from pg_stat_activity where datname = $1', [DATABASE]),
  )
  expect(left).toEqual([])
})
