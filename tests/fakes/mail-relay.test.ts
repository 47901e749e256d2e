import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createTransport } from 'nodemailer'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { startMailRelay, type MailRelay } from '@/fakes/mail-relay'
import { startMailbox } from '@/fakes/mailbox'
import { freePort } from '@/lib/commands/free-port'

const folder = mkdtempSync(join(tmpdir(), 'evenlot-mail-'))
const refusedFile = join(folder, 'refused.json')
let mailbox: { close(): Promise<void> }
let relay: MailRelay
let webPort: number

beforeAll(async () => {
  const smtpPort = await freePort()
  webPort = await freePort()
  mailbox = await startMailbox({ smtpPort, webPort, folder: join(folder, 'messages') })
  relay = await startMailRelay({ port: 0, mailboxPort: smtpPort, refusedFile })
})
afterAll(async () => {
  await relay?.close()
  await mailbox?.close()
  rmSync(folder, { recursive: true, force: true })
})

function send(to: string) {
  const transport = createTransport({ host: '127.0.0.1', port: relay.port, ignoreTLS: true })
  return transport.sendMail({
    from: 'studies@evenlot.example',
    to,
    subject: `For ${to}`,
    text: 'Grüße, 5 µm',
  })
}

async function subjects(): Promise<string[]> {
  const reply = await fetch(`http://127.0.0.1:${webPort}/api/email`)
  const messages = (await reply.json()) as { subject: string }[] | { data: { subject: string }[] }
  return (Array.isArray(messages) ? messages : messages.data).map(({ subject }) => subject)
}

it('passes mail on to the mailbox', async () => {
  await send('ada@aspen.example')
  await expect.poll(subjects).toContain('For ada@aspen.example')
})

it('refuses a chosen address for good, in any spelling, until the rule is taken back', async () => {
  writeFileSync(refusedFile, JSON.stringify(['gone@birch.example']))
  await expect(send('Gone@Birch.example')).rejects.toMatchObject({ responseCode: 550 })
  await expect(send('here@birch.example')).resolves.toMatchObject({ rejected: [] })
  writeFileSync(refusedFile, '[]')
  await expect(send('gone@birch.example')).resolves.toMatchObject({ rejected: [] })
})

it('defers mail while the mailbox is away', async () => {
  const lonely = await startMailRelay({ port: 0, mailboxPort: await freePort(), refusedFile })
  const transport = createTransport({ host: '127.0.0.1', port: lonely.port, ignoreTLS: true })
  const message = { from: 'studies@evenlot.example', to: 'ada@aspen.example', subject: 'Later', text: '…' }
  await expect(transport.sendMail(message)).rejects.toMatchObject({ responseCode: 451 })
  await lonely.close()
})
