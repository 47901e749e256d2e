import { readFileSync } from 'node:fs'
import { expect, test } from '@playwright/test'
import { listRoutes } from './support/actions'
import { foundCommittee, openAttackWorld, stageStudy, type Committee } from './support/attack-world'
import { send } from './support/send'

/*
 * Requests without a session, dressed up as the framework's own: the inner marks by which one part of it
 * tells another that a request has been checked, and the addresses of its payloads.
 */

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let studyId: string
let markers: string[]

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  const staged = await stageStudy(world, committee, { stage: 'review' })
  studyId = staged.studyId
  const named = world.owner
    .selectFrom('study')
    .select(['title', 'short_name'])
    .where('study_id', '=', studyId)
  const { title, short_name: shortName } = await named.executeTakeFirstOrThrow()
  const people = committee.laboratories.flatMap(({ laboratory, city, contactName, address }) => [
    laboratory,
    city,
    contactName,
    address,
  ])
  markers = [title, shortName, ...people]
})
test.afterAll(() => world?.destroy())

const five = (name: string) => Array.from({ length: 5 }, () => name).join(':')

const disguises: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  'nothing at all': {},
  'a subrequest of the proxy': { 'x-middleware-subrequest': 'proxy' },
  'a subrequest of a middleware, five deep': { 'x-middleware-subrequest': five('middleware') },
  'a subrequest of a middleware under src, five deep': { 'x-middleware-subrequest': five('src/middleware') },
  'a subrequest of a proxy under src, five deep': { 'x-middleware-subrequest': five('src/proxy') },
  'a request that was let through': { 'x-middleware-next': '1', 'x-middleware-rewrite': '/studies' },
  'a request already routed': {
    'x-matched-path': '/studies/[studyId]',
    'x-invoke-path': '/studies/[studyId]',
    'x-invoke-status': '200',
  },
  'a payload': { rsc: '1' },
  'a prefetch': { rsc: '1', 'next-router-prefetch': '1' },
  'a prefetched segment': { rsc: '1', 'next-router-prefetch': '1', 'next-router-segment-prefetch': '/_tree' },
  'a whole page as a segment': { rsc: '1', 'next-router-segment-prefetch': '/_full' },
  'a data request': { 'x-nextjs-data': '1' },
  'an inner action': { 'x-action-forwarded': '1' },
}

function spellings(path: string): string[] {
  const build = `/_next/data/${readFileSync('.next/BUILD_ID', 'utf8').trim()}`
  return [
    path,
    `${path}/`,
    `${path}.rsc`,
    `${path}.txt`,
    `${path}.segments/_tree.segment.rsc`,
    `${path}.segments/_full.segment.rsc`,
    `${path}.prefetch.rsc`,
    `${path}?_rsc=1abcd`,
    `${build}${path}.json`,
    `/.${path}`,
    `/sign-in/..${path}`,
    path.replace('/s', '/%73').replace('/p', '/%70').replace('/c', '/%63'),
  ]
}

const open = [
  '/',
  '/published',
  '/published/[slug]',
  '/sign-in',
  '/sign-in/code',
  '/sign-in/confirm',
  '/invitation',
]

function protectedPaths(): string[] {
  return listRoutes()
    .filter(({ kind, route }) => kind === 'page' && !open.includes(route) && !route.startsWith('/_'))
    .map(({ route }) =>
      route.replace('[studyId]', studyId).replace('[number]', '1').replace('[uploadId]', studyId),
    )
}

function betrayed(text: string): string[] {
  return markers.filter((marker) => text.includes(marker))
}

test('A-01: the marks searched for are there for whoever may see them', async () => {
  const cookie = await world.cookieOf(committee.coordinator)
  const pages = [`/studies/${studyId}`, `/studies/${studyId}/laboratories`]
  const texts = await Promise.all(pages.map(async (path) => (await send({ path, cookie })).text))
  expect(betrayed(texts.join()).sort()).toEqual([...markers].sort())
})

test('A-01: no protected page gives a private byte to a request without a session, however it is dressed', async () => {
  test.setTimeout(120_000)
  const paths = protectedPaths()
  expect(paths.length).toBeGreaterThan(15)
  const wrong: string[] = []
  for (const path of paths) {
    const asked = [
      ...Object.entries(disguises).map(([what, headers]) => ({ what, path, headers })),
      ...spellings(path).map((spelling) => ({ what: `spelt ${spelling}`, path: spelling, headers: {} })),
    ]
    const answers = await Promise.all(asked.map(async (each) => ({ ...each, answer: await send(each) })))
    for (const { what, answer } of answers) {
      if (betrayed(answer.text).length > 0)
        wrong.push(`${path} as ${what}: ${betrayed(answer.text).join(', ')}`)
      // A payload cannot be answered by another address; it says inside where to go.
      const leadsToSignIn = answer.status === 200 && answer.text.includes('NEXT_REDIRECT;replace;/sign-in')
      if (![307, 308, 401, 404, 400].includes(answer.status) && !leadsToSignIn)
        wrong.push(`${path} as ${what}: status ${answer.status}`)
    }
  }
  expect(wrong).toEqual([])
})

test('A-01: a public page asked with the ids of a private one shows the public page alone', async () => {
  for (const path of [
    `/?nxtPstudyId=${studyId}`,
    `/published?studyId=${studyId}&nxtPslug=${studyId}`,
    `/sign-in?nxtPstudyId=${studyId}`,
  ])
    expect(
      betrayed((await send({ path, headers: { rsc: '1', 'x-matched-path': `/studies/${studyId}` } })).text),
    ).toEqual([])
})

test('A-01: no handler gives a private byte to a request without a session, however it is dressed', async () => {
  const handlers = listRoutes()
    .filter(({ kind, route }) => kind === 'route' && /^\/api\/(studies|participations)\//.test(route))
    .map(({ route }) =>
      route.replace('[studyId]', studyId).replace('[uploadId]', studyId).replace('[file]', 'x.csv'),
    )
  expect(handlers.length).toBeGreaterThan(6)
  for (const path of handlers)
    for (const headers of Object.values(disguises)) {
      const answer = await send({ path, headers })
      // The framework first has a payload asked for at an address of its own, which says nothing either.
      const isAskedAgain = answer.status === 307 && answer.headers.location?.includes(`${path}?_rsc`)
      if (!isAskedAgain) expect([401, 405], `${path} ${JSON.stringify(headers)}`).toContain(answer.status)
      expect(betrayed(answer.text)).toEqual([])
    }
})
