import type { AddressInfo } from 'node:net'
import { SMTPServer } from 'smtp-server'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { layOutLetter } from '@/lib/mail/letter'
import { createMailTransport, type MailTransport, type OutgoingMail } from '@/lib/mail/transport'

interface Received {
  readonly from: string
  readonly to: string[]
  readonly head: string
  readonly message: string
}

let received: Received[]
let refuseWith: { at: 'rcpt' | 'data'; code: number } | null
let server: SMTPServer
let transport: MailTransport

beforeEach(async () => {
  received = []
  refuseWith = null
  server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onRcptTo: (_address, _session, done) => done(refuseWith?.at === 'rcpt' ? fault(refuseWith.code) : null),
    onData: (stream, session, done) => {
      const chunks: Buffer[] = []
      stream.on('data', (chunk: Buffer) => chunks.push(chunk))
      stream.on('end', () => {
        if (refuseWith?.at === 'data') return done(fault(refuseWith.code))
        const message = Buffer.concat(chunks).toString('utf8')
        const from = session.envelope.mailFrom ? session.envelope.mailFrom.address : ''
        const to = session.envelope.rcptTo.map(({ address }) => address)
        received.push({ from, to, message, head: unfold(message.split('\r\n\r\n', 1)[0] ?? '') })
        done(null)
      })
    },
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.server.address() as AddressInfo
  transport = createMailTransport({
    smtpUrl: `smtp://127.0.0.1:${port}`,
    mailFrom: 'Evenlot <studies@evenlot.example>',
  })
})

afterEach(async () => {
  transport.close()
  await new Promise<void>((resolve) => server.close(resolve))
})

function outgoing(change: Partial<OutgoingMail> = {}): OutgoingMail {
  const letter = { about: 'Flour 27', subject: 'invitation', paragraphs: ['Come.'], closing: ['Bye.'] }
  return {
    mailId: '5a1f7a50-93b5-4a5c-8a50-0b6ac0f2b7c1',
    recipient: 'ada@quill.example',
    replyTo: 'bea@ember.example',
    ...layOutLetter(letter),
    ...change,
  }
}

describe('a mail on its way out', () => {
  it('goes to one recipient by its envelope, and names that one alone', async () => {
    expect(await transport.send(outgoing())).toMatchObject({ outcome: 'sent' })
    const [mail] = received
    expect(mail?.to).toEqual(['ada@quill.example'])
    expect(mail?.from).toBe('studies@evenlot.example')
    expect(headerOf(mail, 'To')).toEqual(['ada@quill.example'])
    expect(headerOf(mail, 'Cc')).toEqual([])
    expect(headerOf(mail, 'Bcc')).toEqual([])
    expect(headerOf(mail, 'From')).toEqual(['Evenlot <studies@evenlot.example>'])
    expect(headerOf(mail, 'Reply-To')).toEqual(['bea@ember.example'])
  })

  it('goes to exactly the address that was kept, even one made to be decoded into another', async () => {
    const recipient = '=?utf-8?q?eve=40evil.example?=@quill.example'
    await transport.send(outgoing({ recipient }))
    expect(received[0]?.to).toEqual([recipient])
    expect(headerOf(received[0], 'To')).toEqual([recipient])
  })

  it('says that a program wrote it, and has the same Message-ID at every try', async () => {
    await transport.send(outgoing())
    await transport.send(outgoing())
    for (const mail of received) {
      expect(headerOf(mail, 'Auto-Submitted')).toEqual(['auto-generated'])
      expect(headerOf(mail, 'Message-ID')).toEqual(['<5a1f7a50-93b5-4a5c-8a50-0b6ac0f2b7c1@evenlot.example>'])
    }
    expect(received).toHaveLength(2)
  })

  it('has plain text first and HTML second, and nothing attached', async () => {
    await transport.send(outgoing())
    const types = [...(received[0]?.message.matchAll(/^Content-Type: ([\w/]+)/gim) ?? [])].map(
      ([, type]) => type,
    )
    expect(types).toEqual(['multipart/alternative', 'text/plain', 'text/html'])
  })

  it('takes no header from what people typed', async () => {
    const names = await headerNames(outgoing())
    for (const nasty of [
      'Flour\r\nBcc: eve@evil.example',
      'Flour\nTo: eve@evil.example',
      'Flour\rList-Unsubscribe: <https://evil.example>',
      'Flour\r\n\r\nA body of its own',
      'Flour\u0085X-Evil: 1',
      'Flour\u2028X-Evil: 1',
      '=?utf-8?q?Flour=0D=0ABcc:=20eve@evil.example?=',
      'eve@evil.example <ada@quill.example>',
    ]) {
      const letter = { about: nasty, subject: nasty, paragraphs: [nasty], closing: [nasty] }
      expect(await headerNames(outgoing(layOutLetter(letter))), JSON.stringify(nasty)).toEqual(names)
      expect(received.at(-1)?.to).toEqual(['ada@quill.example'])
    }
  })

  it('takes none from a subject that came unprepared either', async () => {
    const names = await headerNames(outgoing())
    expect(await headerNames(outgoing({ subject: 'a\r\nBcc: eve@evil.example' }))).toEqual(names)
  })
})

describe('a mail that is not taken', () => {
  it.each([
    ['rcpt', 550, 'refused'],
    ['rcpt', 450, 'deferred'],
    ['data', 554, 'refused'],
    ['data', 451, 'deferred'],
  ] as const)('at %s with %i is %s', async (at, code, outcome) => {
    refuseWith = { at, code }
    const delivery = await transport.send(outgoing())
    expect(delivery.outcome).toBe(outcome)
    expect(delivery.detail).toContain(String(code))
    expect(received).toEqual([])
  })

  it('because no server is there is deferred', async () => {
    const nowhere = createMailTransport({
      smtpUrl: 'smtp://127.0.0.1:1',
      mailFrom: 'studies@evenlot.example',
    })
    expect(await nowhere.send(outgoing())).toEqual({ outcome: 'deferred', detail: 'ESOCKET' })
    nowhere.close()
  })
})

async function headerNames(mail: OutgoingMail): Promise<string[]> {
  await transport.send(mail)
  const head = received.at(-1)?.head ?? ''
  return head.split('\r\n').map((line) => line.split(':', 1)[0]?.toLowerCase() ?? '')
}

function headerOf(mail: Received | undefined, name: string): string[] {
  const lines = mail?.head.split('\r\n') ?? []
  return lines
    .filter((line) => line.toLowerCase().startsWith(`${name.toLowerCase()}:`))
    .map((line) => line.slice(name.length + 1).trim())
}

function unfold(head: string): string {
  return head.replace(/\r\n[ \t]+/g, ' ')
}

function fault(responseCode: number): Error {
  return Object.assign(new Error(`${responseCode} not taken`), { responseCode })
}
