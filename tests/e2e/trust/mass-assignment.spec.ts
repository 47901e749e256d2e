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
import { fromOurPage, send } from './support/send'

/* fields that a form of ours never has, sent along with those it has. */

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let study: StagedStudy
let victim: StagedStudy

test.beforeAll(async () => {
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  study = await stageStudy(world, committee, { stage: 'open', returns: false })
  victim = await stageStudy(world, await foundCommittee(world, { laboratories: 2 }), {
    stage: 'open',
    returns: false,
  })
})
test.afterAll(() => world?.destroy())

const bait = () => ({
  role: 'coordinator',
  actorRole: 'coordinator',
  excluded: 'true',
  code: 'Z99',
  number: '7',
  returnId: victim.studyId,
  participantId: victim.studyId,
  participant_id: victim.studyId,
  personId: victim.studyId,
  receivedAt: '2020-01-01T00:00:00Z',
  submittedAt: '2020-01-01T00:00:00Z',
  receiptNumber: 'AAAA-AAAA-AAAA',
  state: 'published',
  organisation_id: victim.studyId,
  __proto__: 'x',
  'constructor.prototype.role': 'administrator',
  '__proto__.role': 'administrator',
  'rows.__proto__.role': 'administrator',
})

test('A-33: a return with fields that are not the laboratory’s to set is the return without them', async () => {
  const cookie = await world.cookieOf(committee.contacts[0] ?? '')
  const checked = JSON.stringify(study.keys.map(() => '412.6'))
  const fields = { ...bait(), studyId: study.studyId, submissionKey: 'bait', checked, remark: '' }
  const answer = await postForm({
    name: 'submitSheetAction',
    fields,
    path: `/participations/${study.studyId}/sheet/check`,
    cookie,
  })
  expect(redirectOf(answer)).toBe(`/participations/${study.studyId}/receipts/1`)
  const { rows } = await sql<{
    number: number
    code: string
    receipt_number: string
    isRecent: boolean
    actor_role: string
    body: string
  }>`
    select number, code, receipt_number, received_at > clock_now() - interval '1 hour' as "isRecent", actor_role, body::text
    from result_return join participant using (study_id, participant_id) join vault.receipt using (study_id, return_id)
      join audit.entry on entry.study_id = result_return.study_id and action = 'return.submitted'
    where result_return.study_id = ${study.studyId}`.execute(world.owner)
  expect(rows).toHaveLength(1)
  expect(rows[0]).toMatchObject({ number: 1, isRecent: true, actor_role: 'contact' })
  expect([rows[0]?.code, rows[0]?.receipt_number]).not.toContain('Z99')
  expect(rows[0]?.receipt_number).not.toBe('AAAA-AAAA-AAAA')
  expect(Object.keys(JSON.parse(rows[0]?.body ?? '{}') as object).sort()).toEqual([
    'bodyDigest',
    'number',
    'participantId',
    'results',
    'returnId',
  ])
  expect(rows[0]?.body).not.toContain(victim.studyId)
})

test('A-33: a draft keeps the places of the form and nothing else', async () => {
  const cookie = await world.cookieOf(committee.contacts[1] ?? '')
  const [key = ''] = study.keys
  const entries = `{"${key}":"1.5","__proto__":"x","constructor":"y","nowhere":"z"}`
  const body = `{"entries":${entries},"remark":"","seenVersion":0,"participantId":"${victim.studyId}","__proto__":{"role":"administrator"}}`
  const path = `/api/participations/${study.studyId}/draft`
  const { status } = await send({
    method: 'PUT',
    path,
    cookie,
    headers: { ...fromOurPage, 'content-type': 'application/json' },
    body,
  })
  expect(status).toBe(200)
  const { rows } = await sql<{ entries: unknown; study_id: string }>`
    select entries, study_id from vault.draft where study_id in (${study.studyId}, ${victim.studyId})`.execute(
    world.owner,
  )
  expect(rows).toEqual([{ entries: { [key]: '1.5' }, study_id: study.studyId }])
})

test('A-33: nobody is appointed to what the form does not offer', async () => {
  const cookie = await world.cookieOf(committee.coordinator)
  const path = `/studies/${study.studyId}/laboratories`
  for (const role of ['coordinator', 'administrator', 'contact', 'owner', '']) {
    const fields = {
      studyId: study.studyId,
      name: 'Raised Person',
      address: `raised-${role}@kites.example`,
      role,
      organisationId: committee.organisationId,
    }
    const { status, text } = await callAction({ name: 'appointAction', fields, path, cookie })
    expect(status).toBe(200)
    expect(text).toContain('Choose what the person does')
  }
  const { rows } = await sql`select 1 from vault."User" where email like 'raised-%'`.execute(world.owner)
  expect(rows).toEqual([])
})

test('A-33: a new study is a draft with an id of ours, in the organisation of its coordinator alone', async () => {
  const cookie = await world.cookieOf(committee.coordinator)
  const fields = {
    ...bait(),
    studyId: victim.studyId,
    organisationId: committee.organisationId,
    shortName: 'K-bait',
    title: 'Tear of baited paper',
    method: 'K 1, tear',
    purpose: '',
    'measurands.0.name': 'Tear',
    'measurands.0.unit': 'N',
    'measurands.0.decimals': '1',
    'measurands.0.measurandId': victim.studyId,
    'measurands.0.studyId': victim.studyId,
    'materials.0.name': 'silk',
    'levels.0.name': 'replicate',
    'levels.0.count': '2',
    localTime: '2099-04-01T12:00',
    zone: 'Europe/Lisbon',
  }
  const answer = await callAction({ name: 'createStudyAction', fields, path: '/studies/new', cookie })
  const made = /[0-9a-f-]{36}/.exec(redirectOf(answer) ?? '')?.[0] ?? ''
  expect(made).not.toBe(victim.studyId)
  const { rows } = await sql`
    select organisation_id, state, (select count(*)::int from measurand where measurand_id = ${victim.studyId}) as stray
    from study join study_state using (study_id) where study_id = ${made}`.execute(world.owner)
  expect(rows).toEqual([{ organisation_id: committee.organisationId, state: 'draft', stray: 0 }])
  expect(Object.prototype).not.toHaveProperty('role')
})
