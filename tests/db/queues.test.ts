import PgBoss from 'pg-boss'
import { sql } from 'kysely'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { queueNames } from '@/lib/jobs/queues'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'

let database: TestDatabase
let boss: PgBoss
beforeAll(async () => {
  database = await createTestDatabase()
  boss = new PgBoss({ connectionString: database.urls.app, migrate: false })
  await boss.start()
})
afterAll(async () => {
  await boss?.stop({ graceful: false })
  await database?.destroy()
})

it('holds every queue the worker serves, and none besides', async () => {
  const names = (await boss.getQueues()).map(({ name }) => name)
  expect(names.filter((name) => !name.startsWith('__pgboss')).sort()).toEqual([...queueNames].sort())
})

it('lets the app send, take, finish and clean up work, though it owns nothing there', async () => {
  const queue = queueNames[0]
  const id = await boss.send(queue, { n: 1 })
  const [job] = await boss.fetch(queue)
  expect(job?.id).toBe(id)
  await boss.complete(queue, id!)
  expect((await boss.getJobById(queue, id!))?.state).toBe('completed')
  await boss.maintain()
  await boss.purgeQueue(queue)
  expect(await boss.getQueueSize(queue)).toBe(0)
})

it('does not let the reader look into the queues', async () => {
  await expect(sql`select * from pgboss.job`.execute(database.reader)).rejects.toThrow('permission denied')
})
