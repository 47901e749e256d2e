import { performance } from 'node:perf_hooks'
import { sql } from 'kysely'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { findActor } from '@/lib/auth/find-actor'
import { handleSignIn } from '@/lib/auth/handle-sign-in'
import { requestSignInLink } from '@/lib/auth/request-link'
import { createSignInLimits } from '@/lib/auth/sign-in-limits'
import { Refusal } from '@/lib/domain/errors'
import { notePeerAddresses, peerHeaderName, readPeer } from '@/lib/web/peer-address'
import type { Parts } from '@/lib/wiring'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'
import {
  addPerson,
  createTestMailServer,
  createTestParts,
  linkIn,
  codeIn,
  sessionIn,
  signInRequest,
  work,
} from './test-parts'

let database: TestDatabase
let parts: Parts

beforeAll(async () => {
  database = await createTestDatabase()
  parts = createTestParts(database)
})
afterAll(() => database.destroy())
beforeEach(async () => {
  await database.owner.deleteFrom('vault.rate_limit').execute()
})

const ask = (address: string, peer: string | null = null) => requestSignInLink(parts, { address, peer })

describe('asking for a link', () => {
  it('answers the same for an address that is nobody’s, writes the same rows, and mails nothing', async () => {
    await addPerson(database, 'known@quill.example')
    const before = await countRows()
    expect(await ask('known@quill.example')).toEqual({ address: 'known@quill.example' })
    const afterKnown = await countRows()
    expect(await ask('stranger@quill.example')).toEqual({ address: 'stranger@quill.example' })
    const afterStranger = await countRows()
    expect(subtract(afterStranger, afterKnown)).toEqual(subtract(afterKnown, before))

    const server = createTestMailServer()
    await work(parts, server)
    expect(server.sent.map(({ recipient }) => recipient)).toEqual(['known@quill.example'])
  })

  it('keeps a stranger’s address out of the outbox', async () => {
    await ask('stranger2@quill.example')
    const { rows } = await sql<{
      text: string
    }>`select string_agg(m::text, ' ') as text from vault.mail m`.execute(database.owner)
    expect(rows[0]?.text).not.toContain('stranger2')
  })

  it('makes nobody of a stranger who guesses right', async () => {
    const address = 'stranger3@quill.example'
    await ask(address)
    const { rows } = await sql<{ id: string }>`
      select request_id as id from vault.sign_in_request where address = ${address}
    `.execute(database.owner)
    const code = parts.secrets.code(rows[0]?.id ?? '')
    const response = await handleSignIn(signInRequest({ address, code }), parts)
    expect(sessionIn(response)).toBeUndefined()
    const { rows: made } = await sql`select from vault."User" where email = ${address}`.execute(
      database.owner,
    )
    expect(made).toEqual([])
  })

  it('says the same of a wrong code whether the address is known, unknown, or never asked', async () => {
    await addPerson(database, 'known4@quill.example')
    await ask('known4@quill.example')
    await ask('stranger4@quill.example')
    const places: (string | null)[] = []
    for (const address of ['known4@quill.example', 'stranger4@quill.example', 'never4@quill.example']) {
      const response = await handleSignIn(signInRequest({ address, code: '1' }), parts)
      places.push(`${response.status} ${response.headers.get('location')}`)
    }
    expect(new Set(places)).toEqual(new Set(['303 /sign-in/code?problem=bad-code']))
  })

  it('takes as long for a stranger as for a person: medians within 20 ms over 500 interleaved pairs', async () => {
    await addPerson(database, 'known5@quill.example')
    const known: number[] = []
    const unknown: number[] = []
    for (let pair = 0; pair < 500; pair += 1) {
      const round = [
        { address: 'known5@quill.example', times: known },
        { address: 'stranger5@quill.example', times: unknown },
      ]
      // Either may profit from what the other warmed up, so they take turns in going first.
      for (const { address, times } of pair % 2 ? round : round.reverse()) {
        const start = performance.now()
        await ask(address)
        times.push(performance.now() - start)
      }
      // Every one is measured on its full way, not turned away by the limits.
      await database.owner.deleteFrom('vault.rate_limit').execute()
    }
    expect(Math.abs(median(known) - median(unknown))).toBeLessThan(20)
  }, 120_000)
})

describe('the limits', () => {
  it('mail an address five times however often it is asked for, and let its person in by the last', async () => {
    const address = 'victim@quill.example'
    await addPerson(database, address)
    for (let each = 0; each < 100; each += 1) await ask(address)
    const server = createTestMailServer()
    const { rows } = await sql<{ mails: number }>`
      select count(*) as mails from vault.mail where recipient = ${address}
    `.execute(database.owner)
    expect(rows[0]?.mails).toBe(5)

    await work(parts, server)
    const last = server.sent.at(-1)
    if (!last) throw new Error('no mail was sent')
    const wrong = codeIn(last) === '00000000' ? '00000001' : '00000000'
    for (let each = 0; each < 30; each += 1)
      await handleSignIn(signInRequest({ address, code: wrong }), parts)
    const session = sessionIn(await handleSignIn(signInRequest({ ...linkIn(last) }), parts))
    expect(await findActor(parts.db, session)).toMatchObject({ address })
  })

  it('do not count what ended in signing in', async () => {
    const address = 'often@quill.example'
    await addPerson(database, address)
    for (let each = 0; each < 8; each += 1) {
      const server = createTestMailServer()
      await ask(address)
      await work(parts, server)
      const mail = server.sent.at(-1)
      if (!mail) throw new Error(`no mail at try ${each + 1}`)
      expect(sessionIn(await handleSignIn(signInRequest({ ...linkIn(mail) }), parts))).toBeDefined()
    }
  })

  it('refuse a crowd from one connection’s address, saying so, and leave others alone', async () => {
    const limits = createSignInLimits(parts.db, parts.secrets, { perPeer: 3 })
    const take = (n: number, peer: string) => limits.take({ address: `crowd${n}@quill.example`, peer })
    expect(await Promise.all([1, 2, 3].map((n) => take(n, '192.0.2.7')))).toEqual(['free', 'free', 'free'])
    expect(await take(4, '192.0.2.7')).toBe('crowd')
    expect(await take(5, '192.0.2.8')).toBe('free')
  })

  it('let no more pass when requests come all at once', async () => {
    const limits = createSignInLimits(parts.db, parts.secrets)
    const verdicts = await Promise.all(
      Array.from({ length: 40 }, () => limits.take({ address: 'rush@quill.example', peer: null })),
    )
    expect(verdicts.filter((verdict) => verdict === 'free')).toHaveLength(5)
  })

  it('keep neither addresses nor places in their table', async () => {
    await ask('quiet@quill.example', '192.0.2.99')
    const { rows } = await sql<{
      text: string
    }>`select string_agg(r::text, ' ') as text from vault.rate_limit r`.execute(database.owner)
    expect(rows[0]?.text).not.toMatch(/quiet|192\.0\.2/)
  })

  it('turn the crowd away with words', async () => {
    for (let each = 0; each < 60; each += 1)
      await createSignInLimits(parts.db, parts.secrets).take({
        address: `c${each}@quill.example`,
        peer: '192.0.2.50',
      })
    const refused = await ask('c@quill.example', '192.0.2.50').catch((error: unknown) => error)
    expect(refused).toBeInstanceOf(Refusal)
    expect((refused as Refusal).code).toBe('too-many')
  })
})

describe('what a client says of itself', () => {
  it('moves neither the links nor the limits', async () => {
    notePeerAddresses()
    const address = 'spoofed@quill.example'
    await addPerson(database, address)
    await ask(address)
    const server = createTestMailServer()
    await work(parts, server)
    const mail = server.sent.at(-1)
    if (!mail) throw new Error('no mail was sent')
    expect(mail.text).toContain('http://localhost:3999/sign-in/confirm#')

    const spoof = {
      host: 'elsewhere.example',
      'x-forwarded-host': 'elsewhere.example',
      'x-forwarded-proto': 'https',
      'x-forwarded-for': '198.51.100.1',
    }
    const response = await handleSignIn(signInRequest({ ...linkIn(mail) }, spoof), parts)
    expect(sessionIn(response)).toBeDefined()
    expect(response.headers.get('location')).toBe('/studies')
    const headers = new Headers({ ...spoof, [peerHeaderName() ?? '']: '192.0.2.1' })
    expect(readPeer(headers, [])).toBe('192.0.2.1')
    expect(readPeer(headers, ['192.0.2.1'])).toBe('198.51.100.1')
    expect(readPeer(new Headers(spoof), ['192.0.2.1'])).toBeNull()
  })
})

async function countRows(): Promise<Record<string, number>> {
  const { rows } = await sql<{ requests: number; tokens: number; mails: number; jobs: number }>`
    select (select count(*) from vault.sign_in_request) as requests,
      (select count(*) from vault."VerificationToken") as tokens,
      (select count(*) from vault.mail) as mails,
      (select count(*) from pgboss.job where name = 'mail.send') as jobs
  `.execute(database.owner)
  return { ...rows[0] }
}

function subtract(a: Record<string, number>, b: Record<string, number>): Record<string, number> {
  return Object.fromEntries(Object.entries(a).map(([name, value]) => [name, value - (b[name] ?? 0)]))
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.floor(sorted.length / 2)] ?? 0
}
