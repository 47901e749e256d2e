import { sql } from 'kysely'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { queueMail } from '@/lib/mail/queue-mail'
import { runJobs } from '@/lib/jobs/run-jobs'
import { startWorker } from '@/lib/jobs/start-worker'
import type { WorkerContext } from '@/lib/jobs/worker-context'
import type { Parts } from '@/lib/wiring'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'
import { createTestMailServer, createTestParts, type TestMailServer } from '@/tests/auth/test-parts'
import { addParticipation, addStudyWorld, type StudyWorld } from './study-world'

let database: TestDatabase
let parts: Parts
let world: StudyWorld
let taken: Awaited<ReturnType<typeof addParticipation>>
let server: TestMailServer
let context: WorkerContext
const logged: string[] = []

beforeAll(async () => {
  database = await createTestDatabase()
  parts = createTestParts(database)
  world = await addStudyWorld(database)
  taken = await addParticipation(database, world)
})
afterAll(() => database.destroy())
beforeEach(() => {
  server = createTestMailServer()
  const { db, jobs, random, secrets } = parts
  context = { db, jobs, random, secrets, mail: server, baseUrl: parts.config.baseUrl }
  logged.length = 0
  vi.spyOn(process.stdout, 'write').mockImplementation((chunk) => (logged.push(String(chunk)), true))
})
afterEach(() => vi.restoreAllMocks())

function queueReceipt() {
  const ids = { studyId: world.studyId, returnId: taken.returnId, participantId: taken.participantId }
  return parts.db.transaction().execute((trx) =>
    queueMail(trx, parts.jobs, {
      kind: 'receipt',
      studyId: world.studyId,
      recipient: 'ada@quill.example',
      ids,
    }),
  )
}

describe('a worker', () => {
  it('takes up what is enqueued, on the app’s own login, and stops when asked', async () => {
    const worker = await startWorker(context)
    await queueReceipt()
    await vi.waitFor(() => expect(server.sent).toHaveLength(1), { timeout: 10_000, interval: 50 })
    await worker.stop()
    await queueReceipt()
    expect(server.sent).toHaveLength(1)
    await runJobs(context)
    expect(server.sent).toHaveLength(2)
  }, 30_000)
})

describe('a job that fails', () => {
  it('comes again, and neither the queue nor the log learns what it held', async () => {
    await queueReceipt()
    server.send = () => Promise.reject(new Error('ada@quill.example could not be written to, 13.41'))
    expect(await runJobs(context)).toEqual([{ queue: 'mail.send', outcome: 'failed' }])
    const { rows } = await sql<{ state: string; output: string }>`
      select state::text, output::text from pgboss.job where name = 'mail.send' and state = 'retry'
    `.execute(database.owner)
    expect(rows).toHaveLength(1)
    const told = `${rows[0]?.output} ${logged.join(' ')}`
    expect(told).toMatch(/defect [0-9a-f]{8}/)
    expect(told).not.toMatch(/ada@|13\.41/)
    expect(logged).toHaveLength(1)
  })

  it('for good, because its row is gone, ends', async () => {
    const analysis = { studyId: '5a1f7a50-93b5-4a5c-8a50-0b6ac0f2b7c1', number: 1 }
    await parts.db.transaction().execute((trx) => parts.jobs.enqueue(trx, 'analysis.run', analysis))
    expect(await runJobs(context)).toEqual([{ queue: 'analysis.run', outcome: 'completed' }])
  })
})

describe('a job’s place in a transaction', () => {
  it('is refused outside what its queue may carry', async () => {
    const wrong = parts.db
      .transaction()
      .execute((trx) => parts.jobs.enqueue(trx, 'mail.send', { mailId: 'no id' }))
    await expect(wrong).rejects.toThrow()
  })

  it('can be put off', async () => {
    const studyId = '5a1f7a50-93b5-4a5c-8a50-0b6ac0f2b7c1'
    await parts.db
      .transaction()
      .execute((trx) =>
        parts.jobs.enqueue(trx, 'analysis.run', { studyId, number: 2 }, { afterSeconds: 600 }),
      )
    expect(await runJobs(context)).toEqual([])
    expect(await runJobs(context, { includeWaiting: true })).toContainEqual({
      queue: 'analysis.run',
      outcome: 'completed',
    })
  })
})
