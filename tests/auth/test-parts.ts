import { createLinkSecrets } from '@/lib/auth/link-secrets'
import { createJobs } from '@/lib/jobs/create-jobs'
import { runJobs } from '@/lib/jobs/run-jobs'
import type { Delivery, MailTransport, OutgoingMail } from '@/lib/mail/transport'
import { systemContext, type Parts } from '@/lib/wiring'
import type { TestDatabase } from '@/tests/support/database'

export const baseUrl = 'http://localhost:3999'

/** The real parts on a test database; only the configuration is made up. */
export function createTestParts(
  database: TestDatabase,
  { base = baseUrl, trustedProxies = [] as string[] } = {},
): Parts {
  const authSecret = 'a-secret-for-tests-that-is-long-enough-to-serve'
  const { randomUUID } = globalThis.crypto
  return {
    config: {
      databaseUrl: database.urls.app,
      databaseReaderUrl: database.urls.reader,
      baseUrl: base,
      authSecret,
      smtpUrl: 'smtp://localhost:1',
      mailFrom: 'Evenlot <studies@evenlot.example>',
      port: 3999,
      trustedProxies,
    },
    db: database.app,
    readerDb: database.reader,
    jobs: createJobs(),
    random: { below: () => 0, uuid: () => randomUUID.call(globalThis.crypto) },
    secrets: createLinkSecrets(authSecret),
  }
}

/** A mail server that keeps what it is given, and answers as told. */
export interface TestMailServer extends MailTransport {
  readonly sent: OutgoingMail[]
  answer: Delivery
}

export function createTestMailServer(): TestMailServer {
  const sent: OutgoingMail[] = []
  const server: TestMailServer = {
    sent,
    answer: { outcome: 'sent', detail: '250 taken' },
    send: async (mail) => {
      if (server.answer.outcome === 'sent') sent.push(mail)
      return server.answer
    },
    close: () => undefined,
  }
  return server
}

/** Lets the worker run until nothing is due. */
export function work(parts: Parts, mail: MailTransport) {
  return runJobs({ ...systemContext(parts), mail, baseUrl: parts.config.baseUrl })
}

export async function addPerson(
  database: TestDatabase,
  address: string,
  name = 'Ada Quill',
): Promise<string> {
  const made = await database.owner
    .insertInto('vault.User')
    .values({ email: address, name })
    .returning('id')
    .executeTakeFirstOrThrow()
  return made.id
}

export function linkIn(mail: OutgoingMail): { token: string; address: string } {
  const fragment = /\/sign-in\/confirm#(\S+)/.exec(mail.text)?.[1]
  const carried = new URLSearchParams(fragment)
  return { token: carried.get('token') ?? '', address: carried.get('address') ?? '' }
}

export function codeIn(mail: OutgoingMail): string {
  const digits = /(\d{4}) (\d{4})/.exec(mail.text)
  return `${digits?.[1] ?? ''}${digits?.[2] ?? ''}`
}

/** The POST that the page's button, or the code's form, makes. */
export function signInRequest(fields: Record<string, string>, headers: Record<string, string> = {}): Request {
  return new Request(`${baseUrl}/api/sign-in`, {
    method: 'POST',
    headers: { 'content-type': 'application/x-www-form-urlencoded', origin: baseUrl, ...headers },
    body: new URLSearchParams(fields).toString(),
  })
}

export function sessionIn(response: Response): string | undefined {
  for (const cookie of response.headers.getSetCookie()) {
    const value = /^(?:__Host-)?evenlot\.session=([^;]+)/.exec(cookie)?.[1]
    if (value) return value
  }
  return undefined
}
