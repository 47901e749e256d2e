import { createServer, type Server } from 'node:http'
import { expect, test } from '@playwright/test'
import { sql } from 'kysely'
import { callAction, listActions, postForm } from './support/actions'
import { foundCommittee, openAttackWorld, stageStudy, type Committee } from './support/attack-world'
import { baseUrl, send } from './support/send'

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let studyId: string
let cookie: string

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  ;({ studyId } = await stageStudy(world, committee, { stage: 'open' }))
  cookie = await world.cookieOf(committee.coordinator)
})
test.afterAll(() => world?.destroy())

const foreign: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  'another site': { origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' },
  'another site in an old browser': { origin: 'https://evil.example' },
  'another site that withholds its origin': { 'sec-fetch-site': 'cross-site' },
  'another port of this host': { origin: 'http://localhost:1', 'sec-fetch-site': 'same-site' },
  'a sandboxed frame (A-07)': { origin: 'null', 'sec-fetch-site': 'cross-site' },
  'a sandboxed frame in an old browser (A-07)': { origin: 'null' },
  'nobody who says where from': {},
  'another site that claims to be a proxy of ours': {
    origin: 'https://evil.example',
    'x-forwarded-host': 'evil.example',
  },
}

async function trail(): Promise<number> {
  const { rows } = await sql<{ entries: number }>`select count(*)::int as entries from audit.entry`.execute(
    world.owner,
  )
  return rows[0]?.entries ?? 0
}

async function stateOfStudy(): Promise<string | undefined> {
  const states = world.owner.selectFrom('study_state').select('state').where('study_id', '=', studyId)
  return (await states.orderBy('number', 'desc').executeTakeFirst())?.state
}

for (const [who, headers] of Object.entries(foreign))
  test(`A-06: every action refuses ${who} with 403, by script and by plain form, and writes nothing`, async () => {
    const before = await trail()
    const names = [...new Set(listActions().map(({ name }) => name))]
    expect(names.length).toBeGreaterThan(25)
    for (const name of names)
      for (const call of [callAction, postForm]) {
        const page = listActions().find((each) => each.name === name)?.page ?? ''
        const path = page.replace('[studyId]', studyId).replace('[uploadId]', studyId)
        const fields = { studyId, reason: 'A reason that is long enough.', address: committee.coordinator }
        const { status } = await call({ name, fields, path, cookie, headers })
        expect(status, `${name} from ${who}`).toBe(403)
      }
    expect(await trail()).toBe(before)
  })

test('A-06: every handler that takes a body refuses another site with 403', async () => {
  const handlers = [
    ['PUT', `/api/participations/${studyId}/draft`],
    ['POST', `/api/participations/${studyId}/uploads`],
    ['POST', '/api/invitations/read'],
    ['POST', '/api/sign-in'],
    ['POST', '/sign-out'],
    ['POST', '/api/auth/signin/mailed-link'],
    ['POST', '/api/auth/signout'],
  ] as const
  for (const [method, path] of handlers)
    for (const [who, headers] of Object.entries(foreign)) {
      const { status } = await send({
        method,
        path,
        cookie,
        headers: { 'content-type': 'application/json', ...headers },
        body: '{}',
      })
      expect(status, `${method} ${path} from ${who}`).toBe(403)
    }
  expect((await send({ path: `/studies/${studyId}`, cookie })).status, 'still signed in').toBe(200)
})

/** A page of someone else on this very host, to which a browser hands our cookie: ports do not part sites. */
function servePage(html: string): Promise<{ server: Server; address: string }> {
  const server = createServer((_request, response) => {
    response.setHeader('content-type', 'text/html')
    response.end(html)
  })
  return new Promise((resolve) => {
    server.listen(0, '127.0.0.1', () => {
      const place = server.address()
      resolve({ server, address: `http://localhost:${typeof place === 'object' ? place?.port : ''}` })
    })
  })
}

function attackingForm(): string {
  const id = listActions().find(({ name }) => name === 'closeStudyAction')?.id
  const fields: [string, string][] = [
    ['$ACTION_REF_1', ''],
    ['$ACTION_1:0', JSON.stringify({ id, bound: '$@1' })],
    ['$ACTION_1:1', '[{"errors":{},"values":{}}]'],
    ['studyId', studyId],
    ['reason', 'Closed by a page of somebody else.'],
  ]
  const inputs = fields.map(
    ([name, value]) => `<input name="${name}" value="${value.replaceAll('"', '&quot;')}">`,
  )
  const action = `${baseUrl}/studies/${studyId}/results`
  return `<form method="post" enctype="multipart/form-data" action="${action}">${inputs.join('')}</form>`
}

interface Lure {
  readonly html: () => string
  readonly origin: (address: string) => string
}

const lures: Readonly<Record<string, Lure>> = {
  'A-06: a form sent by a script of another page does not close a study in its coordinator’s name': {
    html: attackingForm,
    origin: (address) => address,
  },
  'A-07: nor does one in a sandboxed frame, whose origin is null': {
    origin: () => 'null',
    html: () =>
      `<iframe sandbox="allow-scripts allow-forms allow-top-navigation" srcdoc="${attackingForm().replaceAll('&', '&amp;').replaceAll('"', '&quot;')}"></iframe>`,
  },
}

for (const [claim, { html, origin }] of Object.entries(lures))
  test(claim, async ({ browser }) => {
    const { server, address } = await servePage(html())
    const context = await browser.newContext()
    try {
      const [name = '', value = ''] = cookie.split('=')
      await context.addCookies([{ name, value, url: baseUrl, httpOnly: true, sameSite: 'Lax' }])
      const page = await context.newPage()
      // Taken on its way: a frame that may not show the answer does not always tell that there was one.
      let met: { origin: string | undefined; status: number } | undefined
      await page.route('**/results', async (route) => {
        const answer = await route.fetch({ maxRedirects: 0 })
        met = { origin: (await route.request().allHeaders()).origin, status: answer.status() }
        await route.fulfill({ response: answer })
      })
      await page.goto(address)
      // Sent from here rather than by the page: what a frame does while it is being made may pass by unseen.
      await page
        .frames()
        .at(-1)
        ?.evaluate(() => document.forms[0]?.submit())
      await expect.poll(() => met).toEqual({ origin: origin(address), status: 403 })
      expect(await stateOfStudy()).toBe('open')
    } finally {
      await context.close()
      server.close()
    }
  })

test('A-06: the very same form from a page of ours closes it, so that the attack was whole', async () => {
  const fields = { studyId, reason: 'Every laboratory has returned.' }
  const answer = await postForm({
    name: 'closeStudyAction',
    fields,
    path: `/studies/${studyId}/results`,
    cookie,
  })
  expect(answer.status).toBe(303)
  expect(await stateOfStudy()).not.toBe('open')
})
