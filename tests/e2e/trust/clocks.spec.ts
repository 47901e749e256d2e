import { expect, test } from '@playwright/test'
import { sql } from 'kysely'
import { invitationToken, layoutOf, openAndAnswer } from '@/db/seed/stage-study'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { inviteLaboratory } from '@/lib/use-cases/laboratories/invite-laboratory'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { sendMail } from '@/lib/use-cases/mail/send-mail'
import { callAction, redirectOf } from './support/actions'
import { foundCommittee, stageStudy, type Committee } from './support/attack-world'
import { openOwnProduct, type OwnProduct } from './support/own-product'
import { send, type Answer } from './support/send'

/* Time as the database has it: against processes whose own clock or zone is wrong, and on nights of clock changes. */

const began = '2027-01-15T09:00:00Z'

let product: OwnProduct
let committee: Committee

test.beforeAll(async () => {
  product = await openOwnProduct('clocks')
  await setClock(began)
  committee = await foundCommittee(product.world, { laboratories: 2 })
})
test.afterAll(() => product?.close())

async function setClock(instant: string): Promise<void> {
  await sql`select set_clock(${instant}::timestamptz, true)`.execute(product.world.owner)
}

function later(instant: string, milliseconds: number): string {
  return new Date(Date.parse(instant) + milliseconds).toISOString()
}

const fromItsPage = () => ({ origin: product.base, 'sec-fetch-site': 'same-origin' })

async function act(
  who: string,
  { name, fields, path }: { name: string; fields: Record<string, string>; path: string },
): Promise<Answer> {
  const cookie = await product.world.cookieOf(who)
  return callAction({ name, fields, path, cookie, headers: fromItsPage(), base: product.base })
}

/** What a person reads on a page. */
async function words(who: string, path: string): Promise<string> {
  const { text } = await send({ path, cookie: await product.world.cookieOf(who), base: product.base })
  const [body = ''] = text.split('<script', 1)
  return `${body} ${text}`
    .replaceAll(/<script.*?<\/script>/gs, ' ')
    .replaceAll(/<[^>]+>/g, ' ')
    .replaceAll(/\s+/g, ' ')
}

async function submit(
  who: string,
  { studyId, keys, key }: { studyId: string; keys: readonly string[]; key: string },
): Promise<string> {
  const checked = JSON.stringify(keys.map(() => '412.6'))
  const answer = await act(who, {
    name: 'submitSheetAction',
    fields: { studyId, submissionKey: key, checked, remark: '' },
    path: `/participations/${studyId}/sheet/check`,
  })
  if (redirectOf(answer)?.includes('/receipts/')) return 'received'
  return /The deadline passed on [^"\\]*/.exec(answer.text)?.[0] ?? `status ${answer.status}`
}

/** A cookie for half an hour carries the moment of its end by the clock of the process that sets it. */
async function ownClockOf({ base }: OwnProduct): Promise<number> {
  const fields = { address: 'nobody@kites.example', next: '/studies' }
  const { headers } = await callAction({
    name: 'requestLinkAction',
    fields,
    path: '/sign-in',
    headers: fromItsPage(),
    base,
  })
  const cookie = headers['set-cookie']?.find((each) => each.startsWith('evenlot.next=')) ?? ''
  return Date.parse(/Expires=([^;]+)/i.exec(cookie)?.[1] ?? '') - 1_800_000
}

const manners = [
  { zone: 'UTC' },
  { zone: 'Pacific/Kiritimati', offsetMs: 86_400_000 },
  { zone: 'America/St_Johns', offsetMs: -86_400_000 },
  { zone: 'Asia/Kathmandu', offsetMs: 90_000 },
]

test('F-10: processes in four zones, with clocks a day early, a day late and 90 s off, decide and say the same', async () => {
  test.setTimeout(120_000)
  const due = '2027-03-14T17:00:00.000Z'
  const [contact = ''] = committee.contacts
  const decisions: Record<string, string>[] = []
  for (const manner of manners) {
    await setClock(began)
    const { studyId, keys } = await stageStudy(product.world, committee, {
      stage: 'open',
      returns: false,
      plan: { localTime: '2027-03-14T17:00', zone: 'Europe/Lisbon' },
    })
    const web = await product.startWeb(manner)
    const off = (await ownClockOf(product)) - Date.now()
    expect(Math.abs(off - (manner.offsetMs ?? 0)), 'the process goes by the clock it was given').toBeLessThan(
      30_000,
    )
    const found: Record<string, string> = {}
    for (const [when, instant] of Object.entries({ before: later(due, -1), at: due, after: later(due, 1) })) {
      await setClock(instant)
      found[`a return ${when} the deadline`] = await submit(contact, { studyId, keys, key: when })
    }
    const page = await words(contact, `/participations/${studyId}`)
    found['the deadline on the page'] = /\d{1,2} Mar 2027, \d\d:\d\d/.exec(page)?.[0] ?? page.slice(0, 400)

    for (const [when, ms] of Object.entries({
      'just within': 12 * 3_600_000 - 1,
      'just past': 12 * 3_600_000 + 1,
    })) {
      await setClock(began)
      const cookie = await product.world.cookieOf(contact)
      await setClock(later(began, ms))
      const { status } = await send({ path: `/participations/${studyId}`, cookie, base: product.base })
      found[`a session ${when} twelve idle hours`] = String(status)
    }
    await web.kill()
    decisions.push(found)
  }
  const [first] = decisions
  expect(first).toEqual({
    'a return before the deadline': 'received',
    'a return at the deadline': 'received',
    'a return after the deadline': expect.stringContaining('14 Mar 2027, 17:00'),
    'the deadline on the page': '14 Mar 2027, 17:00',
    'a session just within twelve idle hours': '200',
    'a session just past twelve idle hours': '307',
  })
  for (const [index, other] of decisions.entries())
    expect(other, JSON.stringify(manners[index])).toEqual(first)
})

/** The words of an invitation as they would be mailed now. */
async function invitationText(studyId: string): Promise<string> {
  const { app, system } = product.world
  const queued = app
    .selectFrom('vault.mail')
    .select('mail_id')
    .where('study_id', '=', studyId)
    .where('kind', '=', 'invitation')
  const { mail_id: mailId } = await queued.executeTakeFirstOrThrow()
  let text = ''
  const mail = {
    send: async (letter: { text: string }) => {
      text = letter.text
      return { outcome: 'sent' as const, detail: 'taken' }
    },
    close: () => undefined,
  }
  await sendMail({ db: app, secrets: system.secrets, baseUrl: product.base, mail }, { mailId })
  return text
}

const planFields = (localTime: string, zone: string, choice?: string) => ({
  organisationId: committee.organisationId,
  shortName: `N-${localTime.slice(5, 10)}`,
  title: 'Tear on a night of changing clocks',
  method: 'K 1, tear',
  purpose: '',
  limitFactor: '2.8',
  'measurands.0.name': 'Tear',
  'measurands.0.unit': 'N',
  'measurands.0.decimals': '1',
  'materials.0.name': 'silk',
  'levels.0.name': 'replicate',
  'levels.0.count': '2',
  localTime,
  zone,
  ...(choice ? { choice } : {}),
})

// Europe changes on 28 March and 31 October 2027, the United States on 14 March and 7 November (from memory).
const skipped = [
  ['2027-03-28T02:30', 'Europe/Berlin'],
  ['2027-03-14T02:30', 'America/New_York'],
] as const
const doubled = [
  {
    localTime: '2027-10-31T02:30',
    zone: 'Europe/Berlin',
    choice: 'later',
    at: '2027-10-31T01:30:00.000Z',
    shown: '31 Oct 2027, 02:30',
    offset: 'UTC+1',
    inLisbon: '31 Oct 2027, 01:30',
  },
  {
    localTime: '2027-11-07T01:30',
    zone: 'America/New_York',
    choice: 'earlier',
    at: '2027-11-07T05:30:00.000Z',
    shown: '7 Nov 2027, 01:30',
    offset: 'UTC-4',
    inLisbon: '7 Nov 2027, 05:30',
  },
]

test('F-11: a deadline in an hour that clocks skip is refused by the form with the times around it, whatever is chosen', async () => {
  await setClock(began)
  const web = await product.startWeb({ zone: 'America/New_York' })
  for (const [localTime, zone] of skipped)
    for (const choice of [undefined, 'earlier', 'later']) {
      const answer = await act(committee.coordinator, {
        name: 'createStudyAction',
        fields: planFields(localTime, zone, choice),
        path: '/studies/new',
      })
      expect(redirectOf(answer)).toBeNull()
      expect(answer.text).toContain('02:30 does not occur. Choose 01:30 or 03:30 instead')
    }
  await web.kill()
})

for (const { localTime, zone, choice, at, shown, offset, inLisbon } of doubled)
  test(`F-11: of the two ${localTime.slice(11)} in ${zone} the coordinator picks the ${choice}, and form, pages and the last instant for returns agree`, async ({
    browser,
  }) => {
    await setClock(began)
    const web = await product.startWeb({ zone: 'Europe/Berlin' })
    const context = await browser.newContext({ baseURL: product.base, timezoneId: 'Asia/Tokyo' })
    const [name = '', value = ''] = (await product.world.cookieOf(committee.coordinator)).split('=')
    await context.addCookies([{ name, value, url: product.base }])
    const page = await context.newPage()
    await page.goto('/studies/new')
    for (const [field, text] of Object.entries(planFields(localTime, zone))) {
      const input = page.locator(`[name="${field}"]`)
      if (field === 'zone') await input.selectOption(text)
      else if (field !== 'organisationId' && field !== 'limitFactor') await input.fill(text)
    }
    await page.getByRole('button', { name: 'Open the draft' }).click()
    await expect(page.getByText('occurs twice').first()).toBeVisible()
    await expect(page.locator('[name="title"]')).toHaveValue('Tear on a night of changing clocks')
    await page.getByLabel(choice === 'later' ? /^The second/ : /^The first/).check()
    await page.getByRole('button', { name: 'Open the draft' }).click()
    await expect(page).toHaveURL(/\/studies\/[0-9a-f-]{36}/)
    const studyId = /[0-9a-f-]{36}/.exec(page.url())?.[0] ?? ''
    await context.close()

    const { rows } = await sql<{ due_at: Date; zone: string; local_time: string }>`
      select due_at, zone, local_time from study_deadline where study_id = ${studyId}`.execute(
      product.world.owner,
    )
    expect(rows.map((row) => ({ ...row, due_at: row.due_at.toISOString() }))).toEqual([
      { due_at: at, zone, local_time: localTime },
    ])
    const coordinator = await product.world.as(committee.coordinator)
    const invitationIds: string[] = []
    for (const laboratory of committee.laboratories)
      invitationIds.push((await inviteLaboratory(coordinator, { studyId, ...laboratory })).invitationId)
    await openAndAnswer(product.world, { coordinator: committee.coordinator, studyId, answers: [] })
    expect(await invitationText(studyId), 'the mail').toContain(inLisbon)
    for (const invitationId of invitationIds) {
      const token = await invitationToken(product.world, { studyId, invitationId })
      await answerInvitation(product.world.system, { token, answer: 'accepted' })
    }
    const plan = await words(committee.coordinator, `/studies/${studyId}/plan`)
    expect(plan).toContain(shown)
    expect(plan.replaceAll('\u2212', '-')).toContain(offset)
    const [contact = '', other = ''] = committee.contacts
    expect(await words(contact, `/participations/${studyId}`)).toContain(inLisbon)
    const keys = listPlaces(await layoutOf(product.world, { studyId, shortName: 'N' })).map(placeKey)
    await setClock(at)
    expect(await submit(contact, { studyId, keys, key: 'last instant' })).toBe('received')
    await setClock(later(at, 1))
    expect(await submit(other, { studyId, keys, key: 'too late' })).toContain(inLisbon)
    await web.kill()
  })
