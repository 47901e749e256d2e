import { expect, test } from '@playwright/test'
import { sql } from 'kysely'
import { dismissCommitteeMember } from '@/lib/use-cases/committee/appoint-committee-member'
import { receiveUpload } from '@/lib/use-cases/returns/receive-upload'
import { submitReturn } from '@/lib/use-cases/returns/submit-return'
import { callAction, listActions, listRoutes } from './support/actions'
import {
  foundCommittee,
  inventEntries,
  openAttackWorld,
  stageStudy,
  type Committee,
} from './support/attack-world'
import { fromOurPage, send } from './support/send'
import { plainWords, verdictOf, type Verdict } from './support/verdict'

/*
 * Every page, handler and server action of the build, asked for by everybody. What is expected is written
 * out by hand from the table of permissions; an endpoint without a row fails.
 */

const roles = [
  'coordinator',
  'contact',
  'otherContact',
  'chair',
  'member',
  'observer',
  'elsewhere',
  'stranger',
  'nobody',
] as const
type Who = (typeof roles)[number]

const MISSING = '00000000-0000-4000-8000-00000000dead'

const coordinators: readonly Who[] = ['coordinator']
const contacts: readonly Who[] = ['contact', 'otherContact']
const reviewers: readonly Who[] = ['coordinator', 'chair', 'member', 'observer']
/** Whose refusals are held beside the answer for what does not exist: the nearest to being let in, and the farthest. */
const compared: readonly Who[] = ['otherContact', 'elsewhere', 'member']

const signedIn: readonly Who[] = roles.filter((who) => who !== 'nobody')

interface Row {
  readonly may: readonly Who[] | 'anyone'
  readonly method?: 'GET' | 'POST' | 'PUT'
  readonly json?: unknown
  /** Which of the staged studies the ids belong to. */
  readonly at?: 'open' | 'review'
}

const rows: Readonly<Record<string, Row>> = {
  '/': { may: 'anyone' },
  '/published': { may: 'anyone' },
  '/published/[slug]': { may: [] },
  '/published/[slug]/[file]': { may: [] },
  '/sign-in': { may: 'anyone' },
  '/sign-in/code': { may: 'anyone' },
  '/sign-in/confirm': { may: 'anyone' },
  '/invitation': { may: 'anyone' },
  '/studies': { may: signedIn },
  '/studies/new': { may: ['coordinator', 'elsewhere'] },
  '/studies/[studyId]': { may: coordinators },
  '/studies/[studyId]/plan': { may: coordinators },
  '/studies/[studyId]/materials': { may: coordinators },
  '/studies/[studyId]/laboratories': { may: coordinators },
  '/studies/[studyId]/laboratories/key': { may: coordinators },
  '/studies/[studyId]/results': { may: coordinators },
  '/studies/[studyId]/scrutiny': { may: coordinators, at: 'review' },
  '/studies/[studyId]/precision': { may: coordinators, at: 'review' },
  '/studies/[studyId]/review': { may: coordinators, at: 'review' },
  '/studies/[studyId]/report': { may: coordinators, at: 'review' },
  '/studies/[studyId]/trail': { may: coordinators },
  '/committee/[studyId]': { may: reviewers, at: 'review' },
  '/committee/[studyId]/confirm': { may: ['coordinator', 'chair'], at: 'review' },
  '/participations/[studyId]': { may: contacts },
  '/participations/[studyId]/sheet': { may: contacts },
  '/participations/[studyId]/sheet/check': { may: contacts },
  '/participations/[studyId]/upload': { may: contacts },
  '/participations/[studyId]/upload/[uploadId]': { may: ['contact'] },
  '/participations/[studyId]/receipts/[number]': { may: ['contact'] },
  '/api/health/live': { may: 'anyone' },
  '/api/health/ready': { may: 'anyone' },
  '/api/openapi.json': { may: 'anyone' },
  '/api/participations/[studyId]/workbook': { may: contacts },
  '/api/participations/[studyId]/draft': {
    may: contacts,
    method: 'PUT',
    json: { entries: {}, remark: '', seenVersion: 0 },
  },
  '/api/participations/[studyId]/uploads/[uploadId]': { may: ['contact'] },
  '/api/participations/[studyId]/uploads/[uploadId]/file': { may: ['contact'] },
  '/api/studies/[studyId]/analysis': { may: coordinators },
  '/api/studies/[studyId]/returns': { may: coordinators },
  '/api/studies/[studyId]/returns/csv': { may: coordinators },
  '/api/studies/[studyId]/trail': { may: coordinators },
  '/api/studies/[studyId]/coded/[file]': { may: reviewers, at: 'review' },
}

/** Endpoints whose callers other tests go through one by one. */
const elsewhereTested = [
  '/_not-found',
  '/_global-error',
  '/sign-out',
  '/api/auth/[...nextauth]',
  '/api/sign-in',
  '/api/invitations/read',
  '/api/participations/[studyId]/uploads',
]

let world: ReturnType<typeof openAttackWorld>
let committee: Committee
let open: { studyId: string; keys: readonly string[]; invitationIds: readonly string[] }
let review: { studyId: string }
let draft: { studyId: string; invitationIds: readonly string[] }
let uploadId: string
let measurandId: string
let materialId: string
let code: string
let memberId: string
let openCode: string
const cookies: Partial<Record<Who, string>> = {}

test.beforeAll(async () => {
  test.setTimeout(120_000)
  world = openAttackWorld()
  committee = await foundCommittee(world, { laboratories: 2 })
  const { coordinator, contacts: addresses, chair, member, observer } = committee
  open = await stageStudy(world, committee, { stage: 'open' })
  review = await stageStudy(world, committee, { stage: 'review' })
  draft = await stageStudy(world, committee, { stage: 'draft' })
  const contact = addresses[0] ?? ''
  const context = await world.as(contact)
  ;({ uploadId } = await receiveUpload(context, {
    studyId: open.studyId,
    fileName: 'x.csv',
    bytes: Buffer.from('a;b\n1;2\n'),
  }))
  // A second receipt of one laboratory: the other one has no receipt of that number.
  await submitReturn(context, {
    studyId: open.studyId,
    submissionKey: 'second',
    entries: inventEntries(open.keys, 7),
    remark: '',
  })
  const { rows: found } = await sql<{ measurand_id: string; material_id: string; code: string }>`
    select measurand_id, material_id, code from measurand join material using (study_id) join participant using (study_id)
    where study_id = ${review.studyId} limit 1`.execute(world.owner)
  ;({ measurand_id: measurandId = '', material_id: materialId = '', code = '' } = found[0] ?? ({} as never))
  const lanes = world.owner.selectFrom('participant').select('code').where('study_id', '=', open.studyId)
  openCode = (await lanes.executeTakeFirstOrThrow()).code
  memberId = (await world.as(member)).actor.personId

  // Someone who holds every role there is, in another organisation and its studies.
  const other = await foundCommittee(world, { laboratories: 2 })
  const theirs = {
    ...other,
    chair: other.coordinator,
    contacts: [other.coordinator, other.contacts[1] ?? ''],
  }
  const laboratories = other.laboratories.map((each, index) =>
    index === 0 ? { ...each, address: other.coordinator } : each,
  )
  await stageStudy(world, { ...theirs, laboratories }, { stage: 'open' })
  const stranger = (await foundCommittee(world)).second
  await sql`delete from vault.organisation_member where person_id = ${(await world.as(stranger)).actor.personId}`.execute(
    world.owner,
  )

  const people = {
    coordinator,
    contact,
    otherContact: addresses[1] ?? '',
    chair,
    member,
    observer,
    elsewhere: other.coordinator,
    stranger,
  }
  for (const [who, address] of Object.entries(people)) cookies[who as Who] = await world.cookieOf(address)
})
test.afterAll(() => world?.destroy())

function pathOf(route: string, { at = 'open' }: Row, isMissing: boolean): string {
  const ids: Readonly<Record<string, string>> = {
    studyId: isMissing ? MISSING : at === 'open' ? open.studyId : review.studyId,
    uploadId: isMissing ? MISSING : uploadId,
    number: '2',
    slug: 'nothing-of-this-name',
    file: `${isMissing ? MISSING : measurandId}.csv`,
  }
  return route.replaceAll(/\[(\w+)\]/g, (_, name: string) => ids[name] ?? name)
}

function ask(route: string, row: Row, who: Who, isMissing = false) {
  const isWriting = row.method !== undefined
  return send({
    method: row.method ?? 'GET',
    path: pathOf(route, row, isMissing),
    cookie: cookies[who],
    headers: isWriting ? { ...fromOurPage, 'content-type': 'application/json' } : {},
    body: isWriting ? JSON.stringify(row.json) : undefined,
  })
}

function expectedVerdict({ may }: Pick<Row, 'may'>, who: Who, isPublic: boolean): Verdict {
  if (may === 'anyone' || may.includes(who)) return 'in'
  return who === 'nobody' && !isPublic ? 'sign in' : 'absent'
}

const ids = () => [open.studyId, review.studyId, draft.studyId, uploadId, MISSING]

test('A-17: every page and handler of the build has a row here, so that a new one is decided and not forgotten', () => {
  expect(
    listRoutes()
      .map(({ route }) => route)
      .sort(),
  ).toEqual([...Object.keys(rows), ...elsewhereTested].sort())
})

test('A-17: each page and handler answers each person as the table says, and absent looks like forbidden', async () => {
  test.setTimeout(180_000)
  const wrong: string[] = []
  for (const [route, row] of Object.entries(rows)) {
    const isPublic = route.startsWith('/published')
    const judge = async (who: Who) => {
      const answer = await ask(route, row, who)
      const verdict = verdictOf(answer)
      const expected = expectedVerdict(row, who, isPublic)
      if (verdict !== expected) wrong.push(`${who} at ${route}: ${verdict}, not ${expected}`)
      if (verdict !== 'absent' || !compared.includes(who)) return
      const ofNone = await ask(route, row, who, true)
      if (plainWords(answer, ids()) !== plainWords(ofNone, ids()) || answer.status !== ofNone.status)
        wrong.push(`${who} at ${route}: told apart from what does not exist`)
    }
    await Promise.all(roles.map(judge))
  }
  expect(wrong).toEqual([])
})

test('A-17: no handler answers by a method that has no row', async () => {
  const wrong: string[] = []
  for (const { kind, route } of listRoutes()) {
    if (kind !== 'route' || route === '/api/auth/[...nextauth]') continue
    const row = rows[route]
    const ownMethods = row ? [row.method ?? 'GET'] : ['POST']
    for (const method of ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'].filter(
      (each) => !ownMethods.includes(each as 'GET'),
    )) {
      const path = pathOf(route, row ?? { may: [] }, false)
      const { status } = await send({ method, path, cookie: cookies.coordinator, headers: fromOurPage })
      if (status !== 405) wrong.push(`${method} ${route}: ${status}`)
    }
  }
  expect(wrong).toEqual([])
})

interface ActionRow {
  readonly may: readonly Who[]
  readonly fields: () => Readonly<Record<string, string>>
  readonly studyId: () => string
}

const plan = {
  shortName: 'K-x',
  title: 'Tear of kite paper',
  method: 'K 1, tear',
  purpose: '',
  limitFactor: '2.8',
  'measurands.0.name': 'Tear',
  'measurands.0.unit': 'N',
  'measurands.0.decimals': '1',
  'materials.0.name': 'silk',
  'levels.0.name': 'replicate',
  'levels.0.count': '2',
  localTime: '2099-04-01T12:00',
  zone: 'Europe/Lisbon',
}
const reason = 'A reason that is long enough.'
const inOpen = () => open.studyId
const inDraft = () => draft.studyId
const inReview = () => review.studyId
const none = () => ({})
const cell = () => ({ code, measurandId, materialId, reason })
const laboratory = {
  laboratory: 'Late Bench',
  city: 'Lateton',
  country: 'Nowhere',
  contactName: 'Late Keeper',
  zone: 'Europe/Lisbon',
}

/** In an order in which each may still do its work for those who may. */
const actionRows: Readonly<Record<string, ActionRow>> = {
  planStudyAction: { may: coordinators, studyId: inDraft, fields: () => plan },
  inviteLaboratoryAction: {
    may: coordinators,
    studyId: inDraft,
    fields: () => ({ ...laboratory, address: 'late@late-bench.example' }),
  },
  inviteLinesAction: {
    may: coordinators,
    studyId: inDraft,
    fields: () => ({
      step: 'confirm',
      lines: 'Line Bench; Lineton; Nowhere; Line Keeper; line@line-bench.example; Europe/Lisbon',
    }),
  },
  correctInvitationAction: {
    may: coordinators,
    studyId: inDraft,
    fields: () => ({
      invitationId: draft.invitationIds[0] ?? '',
      contactName: 'New Keeper',
      address: 'new@bench.example',
      zone: 'Europe/Lisbon',
    }),
  },
  openStudyAction: { may: coordinators, studyId: inDraft, fields: none },
  sendAgainAction: {
    may: coordinators,
    studyId: inDraft,
    fields: () => ({ invitationId: draft.invitationIds[1] ?? '' }),
  },
  appointAction: {
    may: coordinators,
    studyId: inOpen,
    fields: () => ({ name: 'New Member', address: 'new.member@kites.example', role: 'member' }),
  },
  dismissAction: { may: coordinators, studyId: inOpen, fields: () => ({ personId: memberId }) },
  revealKeyAction: { may: coordinators, studyId: inOpen, fields: none },
  setDeadlineAction: {
    may: coordinators,
    studyId: inOpen,
    fields: () => ({ localTime: '2099-04-01T12:00', zone: 'Europe/Lisbon' }),
  },
  requestExtensionAction: {
    may: contacts,
    studyId: inOpen,
    fields: () => ({ message: 'Our machine is being mended until Friday.' }),
  },
  checkSheetAction: {
    may: contacts,
    studyId: inOpen,
    fields: () => ({ draftVersion: '1', remark: '', 'entry-0': '401.5' }),
  },
  submitSheetAction: {
    may: contacts,
    studyId: inOpen,
    fields: () => ({
      submissionKey: 'sweep',
      checked: JSON.stringify(open.keys.map(() => '400.1')),
      remark: '',
    }),
  },
  recheckUploadAction: {
    may: ['contact'],
    studyId: inOpen,
    fields: () => ({ uploadId, decimalMark: 'comma' }),
  },
  submitUploadAction: { may: ['contact'], studyId: inOpen, fields: () => ({ uploadId, remark: '' }) },
  grantExtensionAction: {
    may: coordinators,
    studyId: inOpen,
    fields: () => ({ code: openCode, localTime: '2099-05-01T12:00', reason }),
  },
  closeStudyAction: { may: coordinators, studyId: inOpen, fields: () => ({ reason }) },
  reopenStudyAction: {
    may: coordinators,
    studyId: inOpen,
    fields: () => ({ localTime: '2099-05-01T12:00', zone: 'Europe/Lisbon', reason }),
  },
  takeBackFromReviewAction: { may: coordinators, studyId: inReview, fields: () => ({ reason }) },
  excludeCellAction: { may: coordinators, studyId: inReview, fields: cell },
  takeCellBackAction: { may: coordinators, studyId: inReview, fields: cell },
  requestAnalysisAction: { may: coordinators, studyId: inReview, fields: none },
  sendToReviewAction: { may: coordinators, studyId: inReview, fields: none },
  proposePublicationAction: { may: coordinators, studyId: inReview, fields: none },
  confirmPublicationAction: {
    may: ['coordinator', 'chair'],
    studyId: inReview,
    fields: () => ({ digest: 'none' }),
  },
  withdrawProposalAction: { may: coordinators, studyId: inReview, fields: () => ({ reason }) },
  createStudyAction: {
    may: coordinators,
    studyId: () => '',
    fields: () => ({ ...plan, organisationId: committee.organisationId }),
  },
}

/** Actions that anyone may send; what they give away is the matter of other tests. */
const publicActions = ['requestLinkAction', 'invitationAction']

function call(name: string, { fields, studyId }: ActionRow, who: Who, isMissing = false) {
  const page = listActions().find((each) => each.name === name)?.page ?? ''
  const where = studyId()
  const place = isMissing ? MISSING : where
  const path = page
    .replace('[studyId]', place || MISSING)
    .replace('[uploadId]', isMissing ? MISSING : uploadId)
  const own = where
    ? { ...fields(), studyId: place }
    : { ...fields(), ...(isMissing ? { organisationId: MISSING } : {}) }
  return callAction({ name, fields: own, path, cookie: cookies[who] })
}

/** All that an action could write. */
async function countWritten() {
  const { rows: counted } = await sql<Record<string, number>>`
    select (select count(*)::int from audit.entry) as entries, (select count(*)::int from vault.mail) as mails,
      (select count(*)::int from study_state) as states, (select count(*)::int from study) as studies,
      (select coalesce(sum(version), 0)::int from vault.draft) as drafts, (select count(*)::int from result_return) as returns,
      (select count(*)::int from vault.upload_check) as checks, (select count(*)::int from analysis_request) as analyses`.execute(
    world.owner,
  )
  return counted[0]
}

test('A-17: every server action of the build has a row here', () => {
  const names = new Set(listActions().map(({ name }) => name))
  expect([...names].sort()).toEqual([...Object.keys(actionRows), ...publicActions].sort())
})

test('A-17: each action refuses whoever may not, as if nothing were there, and writes nothing', async () => {
  test.setTimeout(120_000)
  const before = await countWritten()
  const wrong: string[] = []
  for (const [name, row] of Object.entries(actionRows)) {
    for (const who of roles.filter((each) => !row.may.includes(each))) {
      const answer = await call(name, row, who)
      const verdict = verdictOf(answer)
      const expected = expectedVerdict(row, who, false)
      if (verdict !== expected) wrong.push(`${who} by ${name}: ${verdict}, not ${expected}`)
      if (verdict !== 'absent' || !compared.includes(who)) continue
      const ofNone = await call(name, row, who, true)
      if (plainWords(answer, ids()) !== plainWords(ofNone, ids()) || answer.status !== ofNone.status)
        wrong.push(`${who} by ${name}: told apart from what does not exist`)
    }
  }
  expect(wrong).toEqual([])
  expect(await countWritten()).toEqual(before)
})

test('A-17: pasted lines are not even read for whoever may not invite', async () => {
  const row = actionRows.inviteLinesAction as ActionRow
  const reading = { ...row, fields: () => ({ lines: 'Line Bench; Lineton' }) }
  for (const who of roles)
    expect(verdictOf(await call('inviteLinesAction', reading, who)), who).toBe(
      expectedVerdict(row, who, false),
    )
})

test('A-17: each action is open to whoever may', async () => {
  const wrong: string[] = []
  for (const [name, row] of Object.entries(actionRows))
    for (const who of row.may) {
      const verdict = verdictOf(await call(name, row, who))
      if (verdict !== 'in') wrong.push(`${who} by ${name}: ${verdict}`)
    }
  expect(wrong).toEqual([])
})

test('A-38: a member who was dismissed is let in no more, with the session that was open', async () => {
  const path = `/committee/${review.studyId}`
  expect(verdictOf(await send({ path, cookie: cookies.observer }))).toBe('in')
  const { actor } = await world.as(committee.observer)
  await dismissCommitteeMember(await world.as(committee.coordinator), {
    studyId: review.studyId,
    personId: actor.personId,
  })
  expect(verdictOf(await send({ path, cookie: cookies.observer }))).toBe('absent')
})
