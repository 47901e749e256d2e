import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { queueMail } from '@/lib/mail/queue-mail'
import type { MailIds, MailKind } from '@/lib/mail/mail-kinds'
import { sendMail } from '@/lib/use-cases/mail/send-mail'
import type { Parts } from '@/lib/wiring'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'
import { createTestMailServer, createTestParts, work, type TestMailServer } from '@/tests/auth/test-parts'
import { runJobs } from '@/lib/jobs/run-jobs'
import { addParticipation, addStudyWorld, type StudyWorld } from './study-world'

let database: TestDatabase
let parts: Parts
let world: StudyWorld
let taken: Awaited<ReturnType<typeof addParticipation>>
let server: TestMailServer

beforeAll(async () => {
  database = await createTestDatabase()
  await database.setClock('2027-03-01T09:00:00Z')
  parts = createTestParts(database)
  world = await addStudyWorld(database)
  taken = await addParticipation(database, world)
})
afterAll(() => database.destroy())
beforeEach(() => {
  server = createTestMailServer()
})

let queued = 0

async function queue<Kind extends MailKind>(
  kind: Kind,
  ids: MailIds<Kind>,
  recipient = 'ada@quill.example',
): Promise<string> {
  const dedupeKey = `test.${(queued += 1)}`
  await parts.db
    .transaction()
    .execute((trx) => queueMail(trx, parts.jobs, { kind, studyId: world.studyId, recipient, ids, dedupeKey }))
  const row = await database.owner
    .selectFrom('vault.mail')
    .select('mail_id')
    .where('dedupe_key', '=', dedupeKey)
    .executeTakeFirstOrThrow()
  return row.mail_id
}

async function addLink(number: number): Promise<void> {
  const { studyId, invitationId } = world
  const token = parts.secrets.token('invitation', `${invitationId}.${number}`)
  await database.owner
    .insertInto('vault.invitation_link')
    .values({ study_id: studyId, invitation_id: invitationId, number, token_hash: parts.secrets.hash(token) })
    .execute()
}

function attempts(mailId: string) {
  return database.owner
    .selectFrom('vault.mail_attempt')
    .select(['number', 'outcome', 'detail'])
    .where('mail_id', '=', mailId)
    .orderBy('number')
    .execute()
}

const direct = (mailId: string) =>
  sendMail({ db: parts.db, secrets: parts.secrets, baseUrl: parts.config.baseUrl, mail: server }, { mailId })

describe('a mail in the outbox', () => {
  it('is not there, nor its job, when the change it belongs to is not made', async () => {
    const failed = parts.db.transaction().execute(async (trx) => {
      await queueMail(trx, parts.jobs, {
        kind: 'receipt',
        studyId: world.studyId,
        recipient: 'ada@quill.example',
        ids: { studyId: world.studyId, ...taken },
      })
      throw new Error('the change failed')
    })
    await expect(failed).rejects.toThrow('the change failed')
    expect(await work(parts, server)).toEqual([])
    expect(server.sent).toEqual([])
  })

  it('is written once for one key', async () => {
    const ids = { studyId: world.studyId, returnId: taken.returnId, participantId: taken.participantId }
    const twice = await parts.db.transaction().execute(async (trx) => {
      const mail = {
        kind: 'receipt',
        studyId: world.studyId,
        recipient: 'ada@quill.example',
        ids,
        dedupeKey: 'receipt.once',
      } as const
      return [await queueMail(trx, parts.jobs, mail), await queueMail(trx, parts.jobs, mail)]
    })
    expect(twice).toEqual([true, false])
    await work(parts, server)
    expect(server.sent).toHaveLength(1)
  })

  it('is sent once, however often its job runs', async () => {
    const mailId = await queue('receipt', {
      studyId: world.studyId,
      returnId: taken.returnId,
      participantId: taken.participantId,
    })
    expect(await work(parts, server)).toEqual([{ queue: 'mail.send', outcome: 'completed' }])
    await direct(mailId)
    await direct(mailId)
    expect(server.sent).toHaveLength(1)
    expect(await attempts(mailId)).toEqual([{ number: 1, outcome: 'sent', detail: '250 taken' }])
  })

  it('is tried again after "not now", and each try is on record', async () => {
    const mailId = await queue('receipt', {
      studyId: world.studyId,
      returnId: taken.returnId,
      participantId: taken.participantId,
    })
    server.answer = { outcome: 'deferred', detail: '450 busy' }
    expect(await work(parts, server)).toEqual([{ queue: 'mail.send', outcome: 'failed' }])
    expect(await work(parts, server)).toEqual([])
    server.answer = { outcome: 'sent', detail: '250 taken' }
    const context = {
      db: parts.db,
      jobs: parts.jobs,
      random: parts.random,
      secrets: parts.secrets,
      mail: server,
      baseUrl: parts.config.baseUrl,
    }
    expect(await runJobs(context, { includeWaiting: true })).toEqual([
      { queue: 'mail.send', outcome: 'completed' },
    ])
    expect(server.sent).toHaveLength(1)
    expect(await attempts(mailId)).toMatchObject([
      { number: 1, outcome: 'deferred', detail: '450 busy' },
      { number: 2, outcome: 'sent' },
    ])
  })

  it('is not tried again after "never"', async () => {
    const mailId = await queue('receipt', {
      studyId: world.studyId,
      returnId: taken.returnId,
      participantId: taken.participantId,
    })
    server.answer = { outcome: 'refused', detail: '550 no such mailbox' }
    expect(await work(parts, server)).toEqual([{ queue: 'mail.send', outcome: 'completed' }])
    server.answer = { outcome: 'sent', detail: '250 taken' }
    await direct(mailId)
    expect(server.sent).toEqual([])
    expect(await attempts(mailId)).toEqual([{ number: 1, outcome: 'refused', detail: '550 no such mailbox' }])
  })

  it('whose worker died while sending is sent by the next try', async () => {
    const mailId = await queue('receipt', {
      studyId: world.studyId,
      returnId: taken.returnId,
      participantId: taken.participantId,
    })
    await database.app.insertInto('vault.mail_attempt').values({ mail_id: mailId, number: 1 }).execute()
    await work(parts, server)
    expect(await attempts(mailId)).toMatchObject([
      { number: 1, outcome: null },
      { number: 2, outcome: 'sent' },
    ])
  })

  it('goes to no recipient that is not plainly one address', async () => {
    const mailId = await queue(
      'receipt',
      { studyId: world.studyId, returnId: taken.returnId, participantId: taken.participantId },
      'ada@quill.example, eve@evil.example',
    )
    await work(parts, server)
    expect(server.sent).toEqual([])
    expect(await attempts(mailId)).toMatchObject([{ outcome: 'dropped', detail: 'no recipient' }])
  })
})

describe('what each mail says and does not', () => {
  it('invites by the link in force, whose secret the database cannot tell', async () => {
    const { studyId, invitationId } = world
    await addLink(1)
    await queue('invitation', { studyId, invitationId, link: '1' })
    await work(parts, server)
    const [mail] = server.sent
    expect(mail?.subject).toBe('Flour 27: invitation to an interlaboratory study')
    expect(mail?.replyTo).toBe('bea@ember.example')
    const link = /http:\/\/localhost:3999\/invitation#(\S+)/.exec(mail?.text ?? '')?.[1] ?? ''
    const [id, number, token] = link.split('.')
    expect([id, number]).toEqual([invitationId, '1'])
    const stored = await database.owner
      .selectFrom('vault.invitation_link')
      .select('token_hash')
      .where('number', '=', 1)
      .executeTakeFirstOrThrow()
    expect(stored.token_hash).toBe(parts.secrets.hash(token ?? ''))
    expect(stored.token_hash).not.toContain(token)
  })

  it('does not mail a link that a later one replaced, nor an invitation that was answered', async () => {
    const { studyId, invitationId } = world
    await addLink(2)
    const replaced = await queue('invitation', { studyId, invitationId, link: '1' })
    await work(parts, server)
    expect(await attempts(replaced)).toMatchObject([{ outcome: 'dropped', detail: 'no longer wanted' }])

    await database.owner
      .insertInto('vault.invitation_answer')
      .values({ study_id: studyId, invitation_id: invitationId, answer: 'accepted' })
      .execute()
    const answered = await queue('invitation', { studyId, invitationId, link: '2' })
    await work(parts, server)
    expect(await attempts(answered)).toMatchObject([{ outcome: 'dropped' }])
    expect(server.sent).toEqual([])
  })

  it('says the latest deadline that was granted, whichever mail is sent', async () => {
    await queue('extension-granted', { studyId: world.studyId, participantId: taken.participantId })
    await work(parts, server)
    expect(server.sent[0]?.text).toContain('25 Mar 2027, 14:00, Sao Paulo (UTC−3)')
  })

  it('names no laboratory, code or value in any of them', async () => {
    const { studyId } = world
    await queue('receipt', { studyId, returnId: taken.returnId, participantId: taken.participantId })
    await queue('extension-requested', { studyId, requestId: taken.requestId }, 'bea@ember.example')
    await queue('extension-granted', { studyId, participantId: taken.participantId })
    await work(parts, server)
    expect(server.sent).toHaveLength(3)
    for (const { subject, text, html } of server.sent) {
      expect(subject).toMatch(/^Flour 27: /)
      for (const secret of ['K47', 'Quill Laboratory', '13.41', '13.57', '13.62', 'oven'])
        expect(`${subject}${text}${html}`).not.toContain(secret)
    }
    expect(server.sent[0]?.text).toContain('3 test results')
  })
})
