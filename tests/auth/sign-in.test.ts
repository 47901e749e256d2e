import { Auth } from '@auth/core'
import { sql } from 'kysely'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { authConfig } from '@/lib/auth/auth-config'
import { findActor } from '@/lib/auth/find-actor'
import { handleLibraryRequest } from '@/lib/auth/handle-library-request'
import { handleSignIn } from '@/lib/auth/handle-sign-in'
import { handleSignOut } from '@/lib/auth/handle-sign-out'
import { requestSignInLink } from '@/lib/auth/request-link'
import type { OutgoingMail } from '@/lib/mail/transport'
import type { Parts } from '@/lib/wiring'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'
import {
  addPerson,
  baseUrl,
  codeIn,
  createTestMailServer,
  createTestParts,
  linkIn,
  sessionIn,
  signInRequest,
  work,
} from './test-parts'

let database: TestDatabase
let parts: Parts
let people = 0
let address = ''
let personId = ''

beforeAll(async () => {
  database = await createTestDatabase()
  parts = createTestParts(database)
})
afterAll(() => database.destroy())

beforeEach(async () => {
  await database.setClock('2027-03-01T09:00:00Z')
  people += 1
  address = `ada${people}@quill.example`
  personId = await addPerson(database, address)
})

async function askForLink(): Promise<OutgoingMail> {
  const server = createTestMailServer()
  await requestSignInLink(parts, { address, peer: null })
  await work(parts, server)
  const [mail] = server.sent
  if (!mail) throw new Error('no mail was sent')
  return mail
}

function scan(path: string, method: string) {
  const request = new Request(`${baseUrl}${path}`, { method })
  return handleLibraryRequest(
    request,
    parts,
    async (asked) => (await Auth(asked, authConfig(parts))) as Response,
  )
}

async function signIn(fields: Record<string, string>, headers?: Record<string, string>) {
  const response = await handleSignIn(signInRequest(fields, headers), parts)
  return { response, session: sessionIn(response), place: response.headers.get('location') }
}

describe('a mailed link', () => {
  it('survives a scanner that asks for it by HEAD and by GET three times, and then signs its person in once', async () => {
    const { token } = linkIn(await askForLink())
    const callback = `/api/auth/callback/mailed-link?${new URLSearchParams({ token, email: address })}`
    for (const method of ['HEAD', 'GET', 'GET', 'GET']) {
      const response = await scan(callback, method)
      expect(response.status).toBe(404)
      expect(response.headers.getSetCookie()).toEqual([])
    }

    const first = await signIn({ token, address })
    expect(first.response.status).toBe(303)
    expect(first.place).toBe('/studies')
    expect(await findActor(parts.db, first.session)).toMatchObject({ personId, address })

    const replay = await signIn({ token, address })
    expect(replay.session).toBeUndefined()
    expect(replay.place).toBe('/sign-in?problem=link')
  })

  it('leads to the page that was wanted, if it is one of ours', async () => {
    const wanted = async (next: string) => {
      const cookie = `evenlot.next=${encodeURIComponent(next)}`
      return (await signIn({ ...linkIn(await askForLink()) }, { cookie })).place
    }
    expect(await wanted('/studies/new?from=mail')).toBe('/studies/new?from=mail')
    for (const elsewhere of ['//evil.example', 'https://evil.example', '/\\\\evil.example', '/sign-out'])
      expect(await wanted(elsewhere)).toBe('/studies')
  })

  it('is closed at every other address of the library too, whatever the method', async () => {
    const { token } = linkIn(await askForLink())
    const addresses = [
      'callback/mailed-link',
      'signin',
      'signin/mailed-link',
      'signout',
      'csrf',
      'providers',
      'verify-request',
    ]
    for (const each of addresses) {
      expect((await scan(`/api/auth/${each}?token=${token}&email=${address}`, 'GET')).status).toBe(404)
    }
    const post = new Request(`${baseUrl}/api/auth/callback/mailed-link?token=${token}&email=${address}`, {
      method: 'POST',
      headers: { origin: baseUrl },
    })
    const answer = await handleLibraryRequest(post, parts, () =>
      Promise.reject(new Error('reached the library')),
    )
    expect(answer.status).toBe(404)
    expect((await signIn({ token, address })).session).toBeDefined()
  })

  it('ends when a later one is asked for', async () => {
    const earlier = linkIn(await askForLink())
    const later = linkIn(await askForLink())
    expect((await signIn({ ...earlier })).place).toBe('/sign-in?problem=link')
    expect((await signIn({ ...later })).session).toBeDefined()
  })

  it('serves for ten minutes by the clock of the database', async () => {
    const inTime = linkIn(await askForLink())
    await database.setClock('2027-03-01T09:09:59Z')
    expect((await signIn({ ...inTime })).session).toBeDefined()

    await database.setClock('2027-03-01T10:00:00Z')
    const tooLate = linkIn(await askForLink())
    await database.setClock('2027-03-01T10:10:01Z')
    expect((await signIn({ ...tooLate })).place).toBe('/sign-in?problem=link')
  })

  it('serves nobody but the address it was sent to', async () => {
    const { token } = linkIn(await askForLink())
    const other = `other${people}@quill.example`
    await addPerson(database, other)
    expect((await signIn({ token, address: other })).session).toBeUndefined()
  })

  it('is nowhere in the database as it stands in the mail, nor is its code', async () => {
    const mail = await askForLink()
    const { session } = await signIn({ ...linkIn(mail) })
    const secret = linkIn(mail).token.split('.')[1] ?? ''
    const stored = await wholeDatabase()
    expect(secret.length).toBe(43)
    for (const usable of [secret, codeIn(mail), session ?? '']) {
      expect(usable).not.toBe('')
      expect(stored).not.toContain(usable)
    }
  })

  it('refuses a POST of another site and keeps the link for its person', async () => {
    const link = linkIn(await askForLink())
    for (const origin of ['https://elsewhere.example', 'null']) {
      expect((await signIn({ ...link }, { origin })).response.status).toBe(403)
    }
    expect((await signIn({ ...link })).session).toBeDefined()
  })
})

describe('the code in the same mail', () => {
  it('signs in where no link can be followed, and uses the link up', async () => {
    const mail = await askForLink()
    const byCode = await signIn({ address, code: codeIn(mail) })
    expect(await findActor(parts.db, byCode.session)).toMatchObject({ personId })
    expect((await signIn({ ...linkIn(mail) })).place).toBe('/sign-in?problem=link')
  })

  it('is dead after five wrong tries, while the link still works', async () => {
    const mail = await askForLink()
    const wrong = codeIn(mail) === '00000000' ? '00000001' : '00000000'
    for (let each = 0; each < 5; each += 1) {
      expect((await signIn({ address, code: wrong })).place).toBe('/sign-in/code?problem=bad-code')
    }
    expect((await signIn({ address, code: codeIn(mail) })).place).toBe('/sign-in/code?problem=bad-code')
    expect((await signIn({ ...linkIn(mail) })).session).toBeDefined()
  })

  it('gives no sixth try to guesses that come all at once', async () => {
    const mail = await askForLink()
    const wrong = codeIn(mail) === '00000000' ? '00000001' : '00000000'
    await Promise.all(Array.from({ length: 20 }, () => signIn({ address, code: wrong })))
    const { rows } = await sql<{ tries: number }>`
      select count(*) as tries from vault.sign_in_code_attempt a join vault.sign_in_request r using (request_id)
      where r.address = ${address}
    `.execute(database.owner)
    expect(rows[0]?.tries).toBe(5)
    expect((await signIn({ address, code: codeIn(mail) })).session).toBeUndefined()
  })

  it('is over after ten minutes', async () => {
    const mail = await askForLink()
    await database.setClock('2027-03-01T09:10:01Z')
    expect((await signIn({ address, code: codeIn(mail) })).place).toBe('/sign-in/code?problem=bad-code')
  })
})

describe('a session', () => {
  it('is a new one at each sign-in, and ends the one the browser came with', async () => {
    const planted = 'a'.repeat(43) + '.1900000000'
    const first = await signIn({ ...linkIn(await askForLink()) }, { cookie: `evenlot.session=${planted}` })
    expect(first.session).toBeDefined()
    expect(first.session).not.toBe(planted)
    expect(await findActor(parts.db, planted)).toBeNull()

    const second = await signIn(
      { ...linkIn(await askForLink()) },
      { cookie: `evenlot.session=${first.session}` },
    )
    expect(second.session).not.toBe(first.session)
    expect(await findActor(parts.db, first.session)).toBeNull()
    expect(await findActor(parts.db, second.session)).not.toBeNull()
  })

  it('ends when its person signs out, for every copy of the cookie', async () => {
    const { session } = await signIn({ ...linkIn(await askForLink()) })
    const request = new Request(`${baseUrl}/sign-out`, {
      method: 'POST',
      headers: { origin: baseUrl, cookie: `evenlot.session=${session}` },
    })
    const response = await handleSignOut(request, parts)
    expect(response.status).toBe(303)
    expect(response.headers.get('clear-site-data')).toContain('"cache"')
    expect(response.headers.get('set-cookie')).toContain('Max-Age=0')
    expect(await findActor(parts.db, session)).toBeNull()
  })

  it('is not ended by another site', async () => {
    const { session } = await signIn({ ...linkIn(await askForLink()) })
    const headers = { origin: 'https://elsewhere.example', cookie: `evenlot.session=${session}` }
    expect(
      (await handleSignOut(new Request(`${baseUrl}/sign-out`, { method: 'POST', headers }), parts)).status,
    ).toBe(403)
    expect(await findActor(parts.db, session)).not.toBeNull()
  })

  it('ends after twelve idle hours', async () => {
    const { session } = await signIn({ ...linkIn(await askForLink()) })
    await database.setClock('2027-03-01T20:59:00Z')
    expect(await findActor(parts.db, session)).not.toBeNull()
    await database.setClock('2027-03-02T08:58:00Z')
    expect(await findActor(parts.db, session)).not.toBeNull()
    await database.setClock('2027-03-02T20:58:01Z')
    expect(await findActor(parts.db, session)).toBeNull()
  })

  it('ends after seven days however much it is used', async () => {
    const { session } = await signIn({ ...linkIn(await askForLink()) })
    const start = Date.parse('2027-03-01T09:00:00Z')
    const sixHours = 6 * 3_600_000
    for (let step = 1; step < 28; step += 1) {
      await database.setClock(new Date(start + step * sixHours))
      expect(await findActor(parts.db, session), `after ${step * 6} hours`).not.toBeNull()
    }
    await database.setClock(new Date(start + 28 * sixHours))
    expect(await findActor(parts.db, session)).toBeNull()
  })

  it('is not cut short by clocks that disagree: neither in the browser nor in the library', async () => {
    await database.setClock('2021-06-01T09:00:00Z')
    const { response, session } = await signIn({ ...linkIn(await askForLink()) })
    const expires = /Expires=([^;]+)/.exec(response.headers.getSetCookie()[0] ?? '')?.[1] ?? ''
    expect(Date.parse(expires)).toBeGreaterThan(Date.now() + 6 * 86_400_000)

    const asked = new Request(`${baseUrl}/api/auth/session`, {
      headers: { cookie: `evenlot.session=${session}` },
    })
    const told = await handleLibraryRequest(
      asked,
      parts,
      async (each) => (await Auth(each, authConfig(parts))) as Response,
    )
    expect(await told.json()).toMatchObject({ user: { name: 'Ada Quill' } })
    expect(await findActor(parts.db, session)).not.toBeNull()
  })

  it('cannot be given a later end by its holder', async () => {
    const { session = '' } = await signIn({ ...linkIn(await askForLink()) })
    expect(await findActor(parts.db, session.replace(/\d{10}$/, '2900000000'))).toBeNull()
  })

  it('has a cookie that no script reads, and over https one that only this host can set', async () => {
    const onHttps = createTestParts(database, { base: 'https://studies.example' })
    const { response } = await signIn({ ...linkIn(await askForLink()) })
    const cookie = response.headers.getSetCookie().find((each) => each.startsWith('evenlot.session='))
    expect(cookie).toMatch(/HttpOnly/)
    expect(cookie).toMatch(/SameSite=Lax/i)

    const link = linkIn(await askForLink())
    const request = new Request('https://studies.example/api/sign-in', {
      method: 'POST',
      headers: { origin: 'https://studies.example', 'content-type': 'application/x-www-form-urlencoded' },
      body: new URLSearchParams(link).toString(),
    })
    const secure = (await handleSignIn(request, onHttps)).headers.getSetCookie()[0]
    expect(secure).toMatch(/^__Host-evenlot\.session=/)
    expect(secure).toMatch(/Secure/)
    expect(secure).toMatch(/Path=\//)
    expect(secure).not.toMatch(/Domain=/)
  })
})

async function wholeDatabase(): Promise<string> {
  const tables = [
    '"User"',
    '"Session"',
    '"VerificationToken"',
    'sign_in_request',
    'mail',
    'mail_attempt',
    'rate_limit',
  ]
  const texts: string[] = []
  for (const table of tables) {
    const { rows } = await sql<{ text: string | null }>`
      select string_agg(t::text, ' ') as text from ${sql.raw(`vault.${table}`)} t
    `.execute(database.owner)
    texts.push(rows[0]?.text ?? '')
  }
  const { rows } = await sql<{
    text: string | null
  }>`select string_agg(j::text, ' ') as text from pgboss.job j`.execute(database.owner)
  return [...texts, rows[0]?.text ?? ''].join(' ')
}
