import { expect, test } from '@playwright/test'
import { sql } from 'kysely'
import { callAction, postForm, redirectOf } from './support/actions'
import {
  foundCommittee,
  openAttackWorld,
  stageStudy,
  type Committee,
  type StagedStudy,
} from './support/attack-world'

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let study: StagedStudy
let cookie: string

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  study = await stageStudy(world, committee, { stage: 'open', returns: false })
  cookie = await world.cookieOf(committee.contacts[0] ?? '')
})
test.afterAll(() => world?.destroy())

function post(call: typeof callAction, { submissionKey, value }: { submissionKey: string; value: string }) {
  const { studyId, keys } = study
  const fields = { studyId, submissionKey, checked: JSON.stringify(keys.map(() => value)), remark: '' }
  return call({ name: 'submitSheetAction', fields, path: `/participations/${studyId}/sheet/check`, cookie })
}

async function stored() {
  const { rows } = await sql<{
    returns: number
    results: number
    entries: number
    mails: number
    receipts: number
  }>`
    select (select count(*)::int from result_return where study_id = ${study.studyId}) as returns,
      (select count(*)::int from test_result where study_id = ${study.studyId}) as results,
      (select count(*)::int from audit.entry where study_id = ${study.studyId} and action = 'return.submitted') as entries,
      (select count(*)::int from vault.mail where study_id = ${study.studyId} and kind = 'receipt') as mails,
      (select count(distinct receipt_number)::int from vault.receipt where study_id = ${study.studyId}) as receipts`.execute(
    world.owner,
  )
  return rows[0]
}

const one = () => ({ returns: 1, results: study.keys.length, entries: 1, mails: 1, receipts: 1 })

test('F-08: fifty posts of one form at once, by script and by plain form, are one return, and all lead to its receipt', async () => {
  const posts = Array.from({ length: 50 }, (_, index) =>
    post(index % 2 ? callAction : postForm, { submissionKey: 'a double click', value: '412.6' }),
  )
  const answers = await Promise.all(posts)
  expect([...new Set(answers.map(redirectOf))]).toEqual([`/participations/${study.studyId}/receipts/1`])
  expect(await stored()).toEqual(one())
})

test('F-08: the same form with other values is refused, naming the receipt that stands and giving back what was sent', async () => {
  const { rows } = await sql<{
    receipt_number: string
  }>`select receipt_number from vault.receipt where study_id = ${study.studyId}`.execute(world.owner)
  const receiptNumber = rows[0]?.receipt_number ?? 'none'
  const answers = await Promise.all(
    Array.from({ length: 10 }, () => post(callAction, { submissionKey: 'a double click', value: '999.9' })),
  )
  for (const { status, text } of answers) {
    expect(status).toBe(200)
    expect(text).toContain('already returned with other values')
    expect(text).toContain(receiptNumber)
    expect(text).toContain('999.9')
  }
  expect(await stored()).toEqual(one())
})
