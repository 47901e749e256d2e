import { cpSync, mkdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { resolve } from 'node:path'
import { expect, test } from '@playwright/test'
import { callAction, listActions, listRoutes, postForm } from './support/actions'
import { foundCommittee, stageStudy, type Committee } from './support/attack-world'
import { openOwnProduct, type OwnProduct } from './support/own-product'
import { send } from './support/send'
import { verdictOf } from './support/verdict'

/*
 * the same build with its proxy taken out. Nothing that guards may have stood there alone: pages, handlers and
 * actions give the verdicts they give behind it.
 */

let product: OwnProduct
let committee: Committee
let studyId: string
let member: string
let coordinator: string

test.beforeAll(async () => {
  test.setTimeout(90_000)
  const folder = resolve('.data/without-the-proxy')
  rmSync(folder, { recursive: true, force: true })
  mkdirSync(folder, { recursive: true })
  for (const name of ['node_modules', 'package.json', 'next.config.mjs', 'public', 'lib'])
    symlinkSync(resolve(name), `${folder}/${name}`)
  const isKept = (path: string) => !/\.next\/(cache|trace|types|diagnostics)/.test(path)
  cpSync('.next', `${folder}/.next`, { recursive: true, filter: isKept, verbatimSymlinks: true })
  const place = `${folder}/.next/server/functions-config-manifest.json`
  const manifest = JSON.parse(readFileSync(place, 'utf8')) as { functions: Record<string, unknown> }
  expect(Object.keys(manifest.functions)).toContain('/_middleware')
  delete manifest.functions['/_middleware']
  writeFileSync(place, JSON.stringify(manifest))

  product = await openOwnProduct('without_the_proxy')
  committee = await foundCommittee(product.world, { laboratories: 2 })
  ;({ studyId } = await stageStudy(product.world, committee, { stage: 'open' }))
  member = await product.world.cookieOf(committee.member)
  coordinator = await product.world.cookieOf(committee.coordinator)
  await product.startWeb({ folder })
})
test.afterAll(async () => {
  await product?.close()
  rmSync('.data/without-the-proxy', { recursive: true, force: true })
})

const open = [
  '/',
  '/published',
  '/sign-in',
  '/sign-in/code',
  '/sign-in/confirm',
  '/invitation',
  '/_not-found',
  '/_global-error',
]

function pathOf(route: string): string {
  return route.replaceAll('[studyId]', studyId).replaceAll(/\[(uploadId|slug|file|number)\]/g, studyId)
}

const ask = (path: string, cookie?: string) => send({ path, cookie, base: product.base })

test('A-02: the proxy is really out: a page lacks what only the proxy sets', async () => {
  const { status, headers } = await ask('/sign-in')
  expect(status).toBe(200)
  expect(headers['content-security-policy']).toBeUndefined()
})

test('A-02: without the proxy no page lets in nobody, or a member who has no business there', async () => {
  const pages = listRoutes().filter(({ kind, route }) => kind === 'page' && !open.includes(route))
  expect(pages.length).toBeGreaterThan(15)
  for (const { route } of pages) {
    const isPublic = route.startsWith('/published')
    expect(verdictOf(await ask(pathOf(route))), route).toBe(isPublic ? 'absent' : 'sign in')
    const own = ['/studies', '/committee/[studyId]'].includes(route)
    expect(verdictOf(await ask(pathOf(route), member)), route).toBe(own ? 'in' : 'absent')
  }
  expect(verdictOf(await ask(`/studies/${studyId}`, coordinator))).toBe('in')
})

test('A-02: without the proxy every action refuses a foreign page, nobody and whoever may not', async () => {
  const isOpen = ['requestLinkAction', 'invitationAction']
  for (const { name, page } of listActions()) {
    const path = pathOf(page)
    const fields = { studyId, reason: 'A reason that is long enough.' }
    for (const call of [callAction, postForm])
      for (const origin of ['https://evil.example', 'null']) {
        const answer = await call({
          name,
          fields,
          path,
          cookie: coordinator,
          headers: { origin },
          base: product.base,
        })
        expect(answer.status, `${name} from ${origin}`).toBeGreaterThanOrEqual(400)
      }
    if (isOpen.includes(name)) continue
    const headers = { origin: product.base, 'sec-fetch-site': 'same-origin' }
    const answer = await callAction({ name, fields, path, cookie: member, headers, base: product.base })
    expect([200, 404], name).toContain(answer.status)
    if (answer.status === 200) expect(answer.text, `${name} was not even read`).toMatch(/"errors":\{"\w+/)
  }
  const states = product.world.owner.selectFrom('study_state').select('state').where('study_id', '=', studyId)
  const { state } = await states.orderBy('number', 'desc').executeTakeFirstOrThrow()
  expect(state).toBe('open')
})
