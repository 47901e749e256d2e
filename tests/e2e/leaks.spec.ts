import { readdirSync } from 'node:fs'
import { expect, test, type Browser } from '@playwright/test'
import { createDatabase } from '@/db/connection'
import { laboratories, people, type DemonstrationLaboratory } from '@/db/seed/twine-people'
import { createLinkSecrets } from '@/lib/auth/link-secrets'
import { composeMail } from '@/lib/mail/compose-mail'
import { layOutLetter } from '@/lib/mail/letter'
import { addressesOfBuild, ask, cookieOf, crawl, type Answer } from './support/crawl'
import { asOwner, readDemonstrationRows, type DemonstrationRows } from './support/demonstration-rows'
import { pageOf } from './support/sign-in'
import { codesIn, tellingWords, wordsIn } from './support/telling-words'

/*
 * Everything that a role can obtain is fetched, and every byte searched for every laboratory of the demonstration:
 * pages, the router's payloads, data, downloads, scripts, drawings, pages of failure, headers. No hit is allowed.
 */

const everyWord = laboratories.flatMap(tellingWords)
const builtFiles = /^\/_next\/static\//

let rows: DemonstrationRows

test.beforeAll(async () => {
  rows = await readDemonstrationRows()
})

test.describe('no laboratory can be told from what is answered', () => {
  test.setTimeout(180_000)

  test('to the public', async () => {
    const answers = await crawl({
      cookie: '',
      seeds: [...seedsOf(rows), ...filesOfBuild()],
      query: queryOf(rows),
    })
    expect(namesFound(answers)).toEqual([])
    expect(rowsFound(answers)).toEqual([])
    const [slug = ''] = rows.slugs
    for (const path of [
      '/',
      '/published',
      `/published/${slug}`,
      `/published/${slug}/results-2.csv`,
      `/published/${slug}/analysis-1.json`,
      '/api/openapi.json',
    ])
      expect(found(answers, path), path).toContain(200)
    expect(answers.filter(({ type }) => type.includes('javascript')).length).toBeGreaterThan(20)
    expect(
      answers.some(
        ({ type, way, path }) =>
          way === 'navigation' && type.startsWith('text/x-component') && path === '/published',
      ),
    ).toBe(true)
    for (const { studyId } of rows.studies) expect(found(answers, `/committee/${studyId}`)[0]).toBe(307)
  })

  for (const { name, address, role } of [people.marit, people.juno, people.leda])
    test(`to the ${role}`, async ({ browser }) => {
      const answers = await crawlAs(browser, address)
      expect(namesFound(answers), `what ${name} was given`).toEqual([])
      expect(rowsFound(answers), `what ${name} was given`).toEqual([])
      for (const { studyId, shortName } of rows.studies)
        expect(found(answers, `/committee/${studyId}`).includes(200), shortName).toBe(
          !['NT-26', 'NT-27'].includes(shortName),
        )
      const types = answers.filter(({ status }) => status === 200).map(({ type }) => type.split(';')[0])
      expect(types).toEqual(
        expect.arrayContaining(['text/html', 'text/x-component', 'text/csv', 'application/json']),
      )
    })

  for (const own of [laboratories[0], laboratories[10]] as DemonstrationLaboratory[])
    test(`to ${own.contactName}, but for the own laboratory`, async ({ browser }) => {
      const answers = await crawlAs(browser, own.address)
      const others = laboratories.filter(({ address }) => address !== own.address).flatMap(tellingWords)
      expect(namesFound(answers, others)).toEqual([])
      // What is published stands by code before everybody, and is no more than that.
      const unpublished = answers.filter(({ path }) => !/^\/(published|$|\?)/.test(path))
      const ownCodes = rows.codes.filter(({ address }) => address === own.address).map(({ code }) => code)
      const codes = rows.codes.map(({ code }) => code).filter((code) => !ownCodes.includes(code))
      expect(
        unpublished
          .filter(({ text }) => codesIn(text, codes).length > 0)
          .map(({ path, text }) => `${path}: ${codesIn(text, codes).join(' ')}`),
      ).toEqual([])
      expect(unpublished.some(({ text }) => codesIn(text, ownCodes).length > 0)).toBe(true)
      expect(answers.some(({ type, status }) => status === 200 && type.includes('spreadsheetml'))).toBe(true)
    })

  test('where the database fails under a page', async ({ browser }) => {
    const cookie = await cookieOf((await pageOf(browser, people.juno.address)).context())
    const inReview = rows.studies.find(({ shortName }) => shortName === 'NT-23')?.studyId ?? ''
    const broken = [
      '/',
      '/published',
      `/published/${rows.slugs[0]}`,
      `/published/${rows.slugs[0]}/results-1.csv`,
      `/committee/${inReview}`,
      `/api/studies/${inReview}/coded/${rows.measurandIds[0]}.csv`,
    ]
    const answers = await withoutTables(['publication', 'analysis_document'], async () => {
      const all: Answer[] = []
      for (const path of broken)
        for (const headers of [{}, { RSC: '1' }] as Record<string, string>[])
          all.push(...(await ask(path, { cookie, way: 'page', headers })))
      return all
    })
    expect(answers.filter(({ status }) => status === 500).length).toBeGreaterThanOrEqual(broken.length)
    expect(namesFound(answers)).toEqual([])
    expect(rowsFound(answers)).toEqual([])
    // Nor does it say what failed.
    expect(
      answers
        .filter(({ text }) => /analysis_document|relation "|select .+ from|kysely|at \w+ \(/i.test(text))
        .map(({ path }) => path),
    ).toEqual([])
  })
})

test('the search finds a laboratory where one stands', async ({ browser }) => {
  const cookie = await cookieOf((await pageOf(browser, people.ines.address)).context())
  const study = rows.studies.find(({ shortName }) => shortName === 'NT-25')?.studyId
  const [page] = await ask(`/studies/${study}/laboratories`, { cookie, way: 'page', headers: {} })
  const seen = wordsIn(
    page?.text ?? '',
    laboratories.map(({ laboratory }) => laboratory.toLowerCase()),
  )
  expect(seen).toHaveLength(12)
})

test('every mail of the demonstration names its own laboratory at most, and carries no code and no value', async () => {
  const db = createDatabase(process.env.DATABASE_URL ?? '', { applicationName: 'test-mails', max: 2 })
  try {
    const parts = {
      db,
      secrets: createLinkSecrets(process.env.AUTH_SECRET ?? ''),
      baseUrl: process.env.BASE_URL ?? '',
    }
    const mails = await asOwner(
      async (client) =>
        (
          await client.query(
            `select mail_id as "mailId", study_id as "studyId", kind, recipient, subject_ids as "subjectIds" from vault.mail`,
          )
        ).rows,
    )
    const values = new Set(
      await asOwner(async (client) =>
        (await client.query(`select distinct text from vault.reported_text`)).rows.map(({ text }) =>
          String(text),
        ),
      ),
    )
    const codes = [...new Set(rows.codes.map(({ code }) => code))]
    const kinds = new Map<string, number>()
    for (const mail of mails) {
      const composed = await composeMail(parts, mail)
      if (!composed) continue
      kinds.set(mail.kind, (kinds.get(mail.kind) ?? 0) + 1)
      const { subject, text, html } = layOutLetter(composed.letter)
      // The secret of a link is drawn, and may hold any letters.
      const said = [subject, text, html].join('\n').replace(/https?:\/\/[^\s"<]+/g, ' ')
      const others = laboratories.filter(({ address }) => address !== mail.recipient).flatMap(tellingWords)
      if (!isCoordinator(mail.recipient))
        expect(wordsIn(said, others), `${mail.kind} for ${mail.recipient}`).toEqual([])
      expect(codesIn(said, codes), `${mail.kind} for ${mail.recipient}`).toEqual([])
      expect(
        (said.match(/\d+[.,]\d+/g) ?? []).filter((number) => values.has(number)),
        mail.kind,
      ).toEqual([])
    }
    expect(Object.fromEntries(kinds)).toMatchObject({
      invitation: expect.any(Number),
      receipt: expect.any(Number),
      'extension-requested': expect.any(Number),
    })
    expect(kinds.get('receipt')).toBeGreaterThan(40)
  } finally {
    await db.destroy()
  }
})

test('every mail that came has one recipient, whom it names', async () => {
  const answer = await fetch(`${process.env.MAILBOX_URL}/api/email`)
  const mails = (await answer.json()) as {
    id: string
    to: { address: string }[]
    cc?: unknown[]
    bcc?: unknown[]
    envelope: { to: { address: string }[] }
  }[]
  expect(mails.length).toBeGreaterThan(3)
  for (const { to, cc = [], bcc = [], envelope } of mails) {
    expect(envelope.to.map(({ address }) => address)).toEqual(to.map(({ address }) => address))
    expect([to.length, cc.length, bcc.length]).toEqual([1, 0, 0])
  }
})

function isCoordinator(address: string): boolean {
  return address === people.ines.address || address === people.tobin.address
}

async function crawlAs(browser: Browser, address: string): Promise<Answer[]> {
  const context = (await pageOf(browser, address)).context()
  const answers = await crawl({
    cookie: await cookieOf(context),
    seeds: seedsOf(rows),
    query: queryOf(rows),
    leave: builtFiles,
  })
  await context.close()
  return answers
}

/** Every route of the build with every study, file and number. */
function seedsOf({ studies, measurandIds, slugs, uploadIds }: DemonstrationRows): string[] {
  const studyIds = studies.map(({ studyId }) => studyId)
  const routes = addressesOfBuild({
    studyId: [...studyIds, 'no-study'],
    slug: [...slugs, 'no-such-page'],
    number: ['1', '2'],
    uploadId: [uploadIds[0] ?? '00000000-0000-4000-8000-000000000000'],
    nextauth: ['session', 'providers'],
    file: ['results-1.csv', 'results-2.csv', 'analysis-1.json', 'analysis-2.json'],
  })
  const coded = studyIds.flatMap((studyId) =>
    measurandIds.flatMap((id) =>
      ['csv', 'json'].map((kind) => `/api/studies/${studyId}/coded/${id}.${kind}`),
    ),
  )
  const tabs = studyIds.flatMap((studyId) =>
    measurandIds.map((id) => `/committee/${studyId}?measurand=${id}`),
  )
  return [...routes, ...coded, ...tabs, '/no-such-page', '/api/no-such-thing', '/published/%E0%A4%A']
}

/** Every parameter that a page reads. */
function queryOf({ invitationIds }: DemonstrationRows): string {
  return new URLSearchParams({
    action: 'return.received',
    correct: invitationIds[0] ?? '',
    done: 'invited',
    extend: '1',
    filled: '1',
    look: 'problems',
    measurand: '2',
    next: '/studies',
    problem: 'bad-code',
    q: 'twine',
    signed: 'out',
    sort: '-title',
    state: 'open',
  }).toString()
}

function filesOfBuild(): string[] {
  return readdirSync('.next/static', { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map(({ parentPath, name }) => `/_next/${parentPath.replace(/^.*?\.next\//, '')}/${name}`)
}

function found(answers: readonly Answer[], path: string): number[] {
  return answers.filter((answer) => answer.path === path && answer.way === 'page').map(({ status }) => status)
}

function namesFound(answers: readonly Answer[], words: readonly string[] = everyWord): string[] {
  return answers.flatMap(({ path, way, text }) => {
    const hits = wordsIn(text, words)
    return hits.length > 0 ? [`${way} ${path}: ${hits.join(', ')}`] : []
  })
}

/** Ids of rows that stand for a laboratory, and the minutes at which returns came. */
function rowsFound(answers: readonly Answer[]): string[] {
  const ids = new Set(rows.tellingIds)
  const minutes = new Set(rows.receivedAt)
  return answers.flatMap(({ path, way, text }) => {
    // What was asked for comes back as its own address, and tells nothing that the one who asks did not know.
    const asked = new Set(decodeURIComponent(path.replace(/%E0%A4%A/g, '')).match(uuids) ?? [])
    const hits = [
      ...new Set([
        ...(text.match(uuids) ?? []).filter((id) => ids.has(id) && !asked.has(id)),
        ...(text.match(instants) ?? []).filter((at) => minutes.has(at)),
      ]),
    ]
    return hits.length > 0 ? [`${way} ${path}: ${hits.join(', ')}`] : []
  })
}

const uuids = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g
const instants = /\d{4}-\d\d-\d\dT\d\d:\d\d/g

/** Takes tables out of the product's sight while work is done, so that its pages truly fail. */
async function withoutTables<T>(tables: readonly string[], work: () => Promise<T>): Promise<T> {
  const rename = (to: (table: string) => [string, string]) =>
    asOwner(async (client) => {
      for (const table of tables) {
        const [from, name] = to(table)
        await client.query(`alter table ${from} rename to ${name}`)
      }
    })
  await rename((table) => [table, `${table}_away`])
  try {
    return await work()
  } finally {
    await rename((table) => [`${table}_away`, table])
  }
}
