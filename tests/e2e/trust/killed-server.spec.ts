import { setTimeout as pause } from 'node:timers/promises'
import { expect, test } from '@playwright/test'
import { sql } from 'kysely'
import { findChainHead, listAuditEntries } from '@/db/queries/audit'
import { randomNumbers } from '@/db/seed/random-numbers'
import { findBreak } from '@/lib/domain/audit-entry'
import { postForm, redirectOf } from './support/actions'
import { foundCommittee, stageStudy, type Committee, type StagedStudy } from './support/attack-world'
import { openOwnProduct, type OwnProduct } from './support/own-product'

/*
 * F-01: the web process is killed outright, again and again, while twelve laboratories return, four at a time. The
 * catalogue asks for 300 trials: KILLS=300 makes them, in a quarter of an hour; the 16 of every run meet up to 64 returns at points
 * of their own.
 */
const kills = Number(process.env.KILLS ?? 16)
const laboratories = 12
const atOnce = 4

let product: OwnProduct
let committee: Committee
let study: StagedStudy
let cookies: string[]

test.beforeAll(async () => {
  product = await openOwnProduct('killed')
  committee = await foundCommittee(product.world, { laboratories })
  study = await stageStudy(product.world, committee, { stage: 'open', returns: false })
  cookies = await Promise.all(committee.contacts.map((contact) => product.world.cookieOf(contact)))
})
test.afterAll(() => product?.close())

/** The receipt that was shown, or null when no answer came. */
async function submit(
  laboratory: number,
  submissionKey: string,
  value = `${400 + laboratory}.5`,
): Promise<string | null> {
  const { studyId, keys } = study
  try {
    const answer = await postForm({
      name: 'submitSheetAction',
      fields: { studyId, submissionKey, checked: JSON.stringify(keys.map(() => value)), remark: '' },
      path: `/participations/${studyId}/sheet/check`,
      cookie: cookies[laboratory],
      headers: { origin: product.base, 'sec-fetch-site': 'same-origin' },
      base: product.base,
    })
    return redirectOf(answer)
  } catch {
    return null
  }
}

interface Stored {
  readonly key: string
  readonly path: string
  readonly results: number
  readonly texts: number
  readonly entries: number
  readonly mails: number
  readonly jobs: number
}

async function storedReturns(): Promise<Stored[]> {
  const { rows } = await sql<Stored>`
    select receipt.participant_id || ' ' || submission_key as key, '/participations/' || receipt.study_id || '/receipts/' || number as path,
      (select count(*)::int from test_result where return_id = receipt.return_id) as results,
      (select count(*)::int from vault.reported_text where return_id = receipt.return_id) as texts,
      (select count(*)::int from audit.entry where body::jsonb ->> 'returnId' = receipt.return_id::text) as entries,
      (select count(*)::int from vault.mail where subject_ids ->> 'returnId' = receipt.return_id::text) as mails,
      (select count(*)::int from vault.mail join pgboss.job on data ->> 'mailId' = mail_id::text
        where subject_ids ->> 'returnId' = receipt.return_id::text) as jobs
    from vault.receipt join result_return using (study_id, return_id)`.execute(product.world.owner)
  return rows
}

/** Sends the return of every laboratory, a few at a time, until the process is gone. */
async function submitAll(
  submissionKey: string,
  onAnswer: (laboratory: number, path: string | null) => void,
): Promise<void> {
  const waiting = cookies.map((_, laboratory) => laboratory)
  let isGone = false
  const hand = async () => {
    for (let next = waiting.shift(); next !== undefined && !isGone; next = waiting.shift()) {
      const path = await submit(next, submissionKey)
      isGone ||= path === null
      onAnswer(next, path)
    }
  }
  await Promise.all(Array.from({ length: atOnce }, hand))
}

test(`F-01: of returns cut off by ${kills} kills each is stored whole or not at all, once after a retry, and none that was acknowledged is lost`, async () => {
  test.setTimeout(240_000 + kills * 4_000)
  const chance = randomNumbers(20261201)
  const acknowledged = new Map<string, string>()
  const cut: { laboratory: number; key: string }[] = []
  const { rows: participants } = await sql<{ address: string; participant_id: string }>`
    select email as address, participant_id from vault.contact join vault."User" on id = person_id where study_id = ${study.studyId}`.execute(
    product.world.owner,
  )
  const participantOf = (laboratory: number) =>
    participants.find(({ address }) => address === committee.contacts[laboratory])?.participant_id ?? ''

  let roundMs = 600
  for (let trial = 0; trial < kills; trial += 1) {
    const key = `trial ${trial}`
    const web = await product.startWeb()
    // A value that is no number stores nothing, and has the process load what it needs: a kill then meets work.
    await submit(0, 'warming up', 'warm')
    const began = performance.now()
    const round = submitAll(key, (laboratory, path) => {
      if (path === null) cut.push({ laboratory, key })
      else acknowledged.set(`${participantOf(laboratory)} ${key}`, path)
    })
    // The first round runs to its end, to learn how long one takes on this machine.
    await (trial === 0 ? round : pause(Math.floor(chance.uniform() * roundMs)))
    if (trial === 0) roundMs = performance.now() - began
    await web.kill()
    await round
  }
  const afterKills = await storedReturns()
  for (const [key, path] of acknowledged)
    expect(afterKills.find((each) => each.key === key)?.path, 'acknowledged and stored').toBe(path)

  const web = await product.startWeb()
  for (const { laboratory, key } of cut)
    expect(await submit(laboratory, key), 'a retry leads to a receipt').toMatch(/\/receipts\/\d+$/)
  for (const [laboratory, contact] of committee.contacts.entries()) {
    const key = `${participantOf(laboratory)} trial 0`
    expect(await submit(laboratory, 'trial 0'), `${contact} is led to the receipt that was shown`).toBe(
      acknowledged.get(key),
    )
  }
  await web.kill()

  const stored = await storedReturns()
  const keys = [
    ...acknowledged.keys(),
    ...cut.map(({ laboratory, key }) => `${participantOf(laboratory)} ${key}`),
  ]
  expect(stored.map(({ key }) => key).sort(), 'one return a key, and none besides').toEqual(keys.sort())
  const whole = { results: study.keys.length, texts: study.keys.length, entries: 1, mails: 1, jobs: 1 }
  for (const { results, texts, entries, mails, jobs } of stored)
    expect({ results, texts, entries, mails, jobs }).toEqual(whole)
  // Both sides of the cut were met, or the kills came too early or too late to show anything.
  expect(cut.length, 'returns cut off').toBeGreaterThan(20)
  expect(acknowledged.size, 'returns acknowledged').toBeGreaterThan(laboratories)
  const unanswered = afterKills.length - acknowledged.size
  test.info().annotations.push({
    type: 'figures',
    description: `${cut.length} cut off, ${acknowledged.size} acknowledged, ${unanswered} stored unanswered`,
  })

  const { app } = product.world
  expect(
    findBreak(await listAuditEntries(app, study.studyId), await findChainHead(app, study.studyId)),
  ).toBeNull()
})
