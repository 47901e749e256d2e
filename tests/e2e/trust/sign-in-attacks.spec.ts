import { createServer, type Server } from 'node:http'
import { expect, test, type Page } from '@playwright/test'
import { sql } from 'kysely'
import { signInToken } from '@/lib/auth/sign-in-token'
import { linkOf, mailFor, nextMail } from '../support/mailbox'
import { callAction, postForm, redirectOf } from './support/actions'
import { foundCommittee, openAttackWorld, stageStudy, type Committee } from './support/attack-world'
import { baseUrl, fromOurPage, send } from './support/send'

let world: ReturnType<typeof openAttackWorld>
let committee: Committee

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  await stageStudy(world, committee, { stage: 'open' })
})
test.afterAll(async () => {
  // These tests ask for more links than people do, and the tests that follow come from the same computer.
  await sql`delete from vault.rate_limit`.execute(world.owner)
  await world.destroy()
})

async function askForLink(address: string): Promise<string> {
  const after = (await mailFor(address)).length
  const answer = await postForm({
    name: 'requestLinkAction',
    fields: { address, next: '/studies' },
    path: '/sign-in',
  })
  expect(answer.status).toBe(303)
  return linkOf(await nextMail(address, { after, subject: /sign in/i }))
}

async function sessionOf(page: Page): Promise<string | undefined> {
  return (await page.context().cookies()).find(({ name }) => name === 'evenlot.session')?.value
}

test('A-09: a link survives a scanner that heads, fetches and draws it with scripts; its person signs in once; nobody after', async ({
  browser,
}) => {
  const link = await askForLink(committee.coordinator)
  const { pathname, search, hash } = new URL(link)
  expect(hash.length, 'the secret stays out of addresses and logs').toBeGreaterThan(40)
  for (const method of ['HEAD', 'GET', 'GET', 'GET']) {
    const { status, headers } = await send({ method, path: pathname + search })
    expect([status, headers['set-cookie']]).toEqual([200, undefined])
  }
  const carried = new URLSearchParams(hash.slice(1))
  const asQuery = new URLSearchParams({
    token: carried.get('token') ?? '',
    email: carried.get('address') ?? '',
    address: carried.get('address') ?? '',
  })
  for (const path of [
    `/api/auth/callback/mailed-link?${asQuery}`,
    `/sign-in/confirm?${asQuery}`,
    `/api/sign-in?${asQuery}`,
  ])
    expect((await send({ path })).headers['set-cookie'], path).toBeUndefined()

  for (let render = 0; render < 5; render += 1) {
    const scanner = await (await browser.newContext()).newPage()
    await scanner.goto(link, { waitUntil: 'networkidle' })
    await expect(scanner.getByRole('button', { name: 'Sign in' })).toBeVisible()
    expect(await sessionOf(scanner)).toBeUndefined()
    await scanner.context().close()
  }

  const person = await (await browser.newContext()).newPage()
  await person.goto(link)
  await expect(person.getByText(committee.coordinator)).toBeVisible()
  await person.getByRole('button', { name: 'Sign in' }).click()
  await expect(person).toHaveURL(/\/studies$/)
  expect(await sessionOf(person)).toBeDefined()
  await person.context().close()

  const late = await (await browser.newContext()).newPage()
  await late.goto(link)
  await late.getByRole('button', { name: 'Sign in' }).click()
  await expect(late.getByText('This link does not sign you in any more')).toBeVisible()
  expect(await sessionOf(late)).toBeUndefined()
  await late.context().close()
})

test('A-16: a session planted before signing in is replaced, and dead afterwards', async ({ browser }) => {
  const planted = await world.cookieOf(committee.second)
  const [name = '', value = ''] = planted.split('=')
  const context = await browser.newContext()
  const page = await context.newPage()
  const link = await askForLink(committee.chair)
  await context.addCookies([{ name, value, url: baseUrl }])
  await page.goto(link)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/studies$/)
  const session = await sessionOf(page)
  expect(session).not.toBe(decodeURIComponent(value))
  expect((await send({ path: '/studies', cookie: planted })).headers.location).toContain('/sign-in')
  expect((await send({ path: '/studies', cookie: `${name}=${session}` })).text).toContain('Person chair')
  await context.close()
})

const elsewhere = [
  '//evil.example',
  '/\\evil.example',
  '\\\\evil.example',
  'https:evil.example',
  'https://evil.example/studies',
  '/%2f/evil.example',
  '/%252f%252fevil.example',
  '/.//evil.example',
  '/\t/evil.example',
  'javascript:alert(1)',
  '/sign-in?next=//evil.example',
  'http://localhost@evil.example',
]

test('A-14: whatever page is asked for, signing in leads to one of ours', async () => {
  for (const next of elsewhere) {
    const { text } = await send({ path: `/sign-in?next=${encodeURIComponent(next)}` })
    expect(/name="next" value="([^"]*)"/.exec(text)?.[1], next).toMatch(/^\/(studies)?$/)
  }
  const { location } = (
    await send({
      path: `/sign-in?next=${encodeURIComponent('//evil.example')}`,
      cookie: await world.cookieOf(committee.member),
    })
  ).headers
  expect(location, 'for someone signed in already').toBe('/studies')
})

test('A-14: nor does a forged journey or a foreign Referer lead elsewhere', async () => {
  for (const next of elsewhere.slice(0, 4)) {
    const asked = await postForm({
      name: 'requestLinkAction',
      fields: { address: committee.member, next },
      path: '/sign-in',
    })
    expect(asked.headers['set-cookie']?.find((cookie) => cookie.startsWith('evenlot.next='))).toMatch(
      /^evenlot\.next=(%2F|\/)(studies)?;/,
    )
    const body = new URLSearchParams({
      address: committee.member,
      token: await latestToken(committee.member),
    })
    const cookie = `evenlot.next=${encodeURIComponent(next)}`
    const { status, headers } = await send({
      method: 'POST',
      path: '/api/sign-in',
      cookie,
      headers: fromOurPage,
      body,
    })
    expect([status, headers.location], next).toEqual([303, '/studies'])
  }
  const headers = { ...fromOurPage, referer: 'https://evil.example/studies' }
  const fields = { studyId: '00000000-0000-4000-8000-00000000dead', reason: '' }
  const turnedAway = await postForm({
    name: 'closeStudyAction',
    fields,
    path: `/studies/${fields.studyId}/results`,
    headers,
  })
  expect(redirectOf(turnedAway)).toBe('/sign-in')
})

/** As the mail carries it; the database holds no more than what it is derived from. */
async function latestToken(address: string): Promise<string> {
  const { rows } = await sql<{ id: string }>`
    select subject_ids ->> 'requestId' as id from vault.mail where recipient = ${address} and kind = 'sign-in' order by queued_at desc limit 1`.execute(
    world.owner,
  )
  return signInToken(rows[0]?.id ?? '', world.system.secrets)
}

test('A-15: forged Host and forwarding headers neither change a mailed link, nor move the limits, nor reach another server', async () => {
  let called = 0
  const canary: Server = createServer((_request, response) => {
    called += 1
    response.end()
  })
  await new Promise<void>((resolve) => canary.listen(0, '127.0.0.1', resolve))
  const place = canary.address()
  const evil = `127.0.0.1:${typeof place === 'object' ? place?.port : ''}`
  const forgeries: Record<string, string>[] = [
    { host: evil },
    { host: evil, origin: `http://${evil}` },
    { 'x-forwarded-host': evil },
    { 'x-forwarded-host': evil, 'x-forwarded-proto': 'https' },
    { 'x-forwarded-host': evil, origin: `http://${evil}` },
    { forwarded: `host=${evil};proto=https;for=1.2.3.4`, 'x-forwarded-for': '1.2.3.4' },
    {
      'x-forwarded-for': '5.6.7.8, 9.9.9.9',
      'x-real-ip': '7.7.7.7',
      'x-forwarded-proto': 'https',
      'x-forwarded-port': '1',
    },
    { 'x-original-url': '/api/health/live', 'x-rewrite-url': `http://${evil}/` },
  ]
  const address = committee.observer
  const peers = async () =>
    (await sql`select 1 from vault.rate_limit where key like 'peer:%'`.execute(world.owner)).rows.length
  await askForLink(address)
  const before = await peers()
  const asked: number[] = []
  for (const forged of forgeries) {
    const headers = { ...fromOurPage, ...forged }
    for (const call of [callAction, postForm])
      asked.push(
        (await call({ name: 'requestLinkAction', fields: { address }, path: '/sign-in', headers })).status,
      )
    await send({
      method: 'GET',
      path: `http://${evil}/studies`,
      headers: { ...forged, upgrade: 'websocket', connection: 'Upgrade' },
    }).catch(() => undefined)
    await send({ path: '/studies', headers: forged })
  }
  canary.close()
  expect(called, 'connections to the forged host').toBe(0)
  expect(await peers(), 'a client cannot be many').toBe(before)
  expect(asked.some((status) => status === 403)).toBe(true)
  const mails = await mailFor(address)
  expect(mails.length).toBeGreaterThan(0)
  for (const mail of mails) {
    expect(linkOf(mail).startsWith(`${baseUrl}/`)).toBe(true)
    expect(mail.text + mail.html).not.toContain(evil)
  }
})

const badAddresses = [
  'victim＠kites.example',
  'victim@kites.example,evil@evil.example',
  'victim@kites.example;evil@evil.example',
  'victim@kites.example evil@evil.example',
  '"victim@kites.example,"@evil.example',
  '"a b"@kites.example',
  'victim@kites.example@evil.example',
  'victim(evil@evil.example)@kites.example',
  '<evil@evil.example>',
  'Victim <evil@evil.example>',
  'victim@kites.example.',
  'victim@[127.0.0.1]',
  'victim@localhost',
  'victim@kites.example\r\nBcc: evil@evil.example',
  'victim@kites.example\u2028Bcc: evil@evil.example',
  'vic\u0000tim@kites.example',
  '=?utf-8?q?evil@evil.example?=@kites.example',
  'victim%evil.example@kites.example\u200b',
  'victim@ｋites.example',
  '.victim@kites.example',
]

test('A-10: an address that could be read in two ways is refused wherever one is typed, and nobody is made or mailed', async () => {
  const { studyId } = await stageStudy(world, committee, { stage: 'open', returns: false })
  const cookie = await world.cookieOf(committee.coordinator)
  const path = `/studies/${studyId}/laboratories`
  const count = async () =>
    (
      await sql`select (select count(*)::int from vault."User") as people, (select count(*)::int from vault.mail) as mails`.execute(
        world.owner,
      )
    ).rows[0]
  const before = await count()
  for (const address of badAddresses) {
    const signIn = await callAction({ name: 'requestLinkAction', fields: { address }, path: '/sign-in' })
    const appoint = await callAction({
      name: 'appointAction',
      fields: { studyId, name: 'New Member', address, role: 'member' },
      path,
      cookie,
    })
    const laboratory = {
      laboratory: `Bench of ${badAddresses.indexOf(address)}`,
      contactName: 'Keeper',
      zone: 'Europe/Lisbon',
    }
    const invite = await callAction({
      name: 'inviteLaboratoryAction',
      fields: { studyId, address, ...laboratory },
      path,
      cookie,
    })
    for (const answer of [signIn, appoint, invite]) {
      expect(redirectOf(answer), JSON.stringify(address)).toBeNull()
      expect(answer.text, JSON.stringify(address)).toContain('Give one mail address')
    }
  }
  expect(await count()).toEqual(before)
})

test('A-11: names that end a header or begin an address make one mail, to one recipient, with our headers', async () => {
  const { studyId } = await stageStudy(world, committee, {
    stage: 'open',
    returns: false,
    plan: { title: 'Tear =?utf-8?q?Bcc=3A?= <evil@evil.example>' },
  })
  const cookie = await world.cookieOf(committee.coordinator)
  const path = `/studies/${studyId}/laboratories`
  const breaking = [
    'Bench\r\nBcc: evil@evil.example',
    'Bench\nList-Unsubscribe: <http://evil.example>',
    'Bench\u0085Bcc: evil@evil.example',
    'Bench\u2028To: evil@evil.example',
  ]
  for (const [index, name] of breaking.entries()) {
    const fields = {
      studyId,
      laboratory: name,
      contactName: name,
      address: `breaking-${index}@bench.example`,
      zone: 'Europe/Lisbon',
      city: '',
      country: '',
    }
    await callAction({ name: 'inviteLaboratoryAction', fields, path, cookie })
  }
  const awkward = 'Eve" <evil@evil.example>, "Adam'
  const address = `awkward-${studyId.slice(0, 8)}@bench.example`
  const fields = {
    studyId,
    laboratory: awkward,
    contactName: awkward,
    address,
    zone: 'Europe/Lisbon',
    city: '',
    country: '',
  }
  expect((await callAction({ name: 'inviteLaboratoryAction', fields, path, cookie })).text).toContain(
    'its invitation is on its way',
  )
  await nextMail(address, { after: 0, subject: /invitation/ })

  const answer = await fetch(`${process.env.MAILBOX_URL}/api/email`)
  const mails = (await answer.json()) as {
    envelope: { to: { address: string }[] }
    headers: Record<string, string>
    to: { address: string }[]
  }[]
  const ours = mails.filter(({ envelope }) =>
    envelope.to.some((each) => /^(awkward|breaking)-|evil/.test(each.address)),
  )
  expect(ours.length).toBeGreaterThan(0)
  for (const { envelope, headers, to } of ours) {
    expect(envelope.to).toHaveLength(1)
    expect(to).toHaveLength(1)
    expect(envelope.to[0]?.address).not.toMatch(/evil/)
    expect(Object.keys(headers).filter((header) => /^(bcc|cc|list-)/i.test(header))).toEqual([])
    expect(JSON.stringify([headers.from, headers.to, headers['reply-to']])).not.toMatch(/evil/)
  }
})
