import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import type { Actor } from '@/lib/domain/actor'
import type { Deadline } from '@/lib/domain/deadline'
import type { StudyPlan } from '@/lib/domain/study-plan'
import type { StudyState } from '@/lib/domain/study-states'

export interface StudyRecord {
  readonly studyId: string
  readonly organisationId: string
  readonly organisation: string
  readonly shortName: string
  readonly title: string
  readonly method: string
  readonly purpose: string
  readonly limitFactor: string
  readonly state: StudyState
  readonly stateSince: Date
  readonly deadline: Deadline & { dueAt: Date }
}

export interface StudyLayoutRecord {
  readonly measurands: readonly {
    measurandId: string
    name: string
    unit: string
    decimals: number
    hasTrueZero: boolean
  }[]
  readonly materials: readonly { materialId: string; name: string; description: string }[]
  readonly levels: readonly { name: string; count: number }[]
}

/** A study within the actor's sight, or undefined. With `lock` its row is held: "share" for a return, "update" for a change of state. */
export async function findStudyFor(
  db: Kysely<DB>,
  actor: Actor,
  studyId: string,
  options: { lock?: 'share' | 'update' } = {},
): Promise<StudyRecord | undefined> {
  if (!isUuid(studyId)) return undefined
  if (options.lock) await lockStudy(db, studyId, options.lock)
  const row = await selectStudies(db, actor).where('study.study_id', '=', studyId).executeTakeFirst()
  return row && toStudy(row)
}

/** Holds a study's row to the end of the transaction. */
export async function lockStudy(
  db: Kysely<DB>,
  studyId: string,
  strength: 'share' | 'update' = 'update',
): Promise<void> {
  const row = db.selectFrom('study').select('study_id').where('study_id', '=', studyId)
  await (strength === 'share' ? row.forShare() : row.forUpdate()).execute()
}

/** Every study within the actor's sight, the newest state first. */
export async function listStudiesFor(db: Kysely<DB>, actor: Actor): Promise<StudyRecord[]> {
  const rows = await selectStudies(db, actor)
    .orderBy('state.entered_at', 'desc')
    .orderBy('study.short_name')
    .execute()
  return rows.map(toStudy)
}

export async function listOrganisationNames(
  db: Kysely<DB>,
  organisationIds: readonly string[],
): Promise<{ organisationId: string; name: string }[]> {
  if (organisationIds.length === 0) return []
  return db
    .selectFrom('organisation')
    .where('organisation_id', 'in', organisationIds)
    .select(['organisation_id as organisationId', 'name'])
    .orderBy('name')
    .execute()
}

function selectStudies(db: Kysely<DB>, actor: Actor) {
  const organisationIds = actor.organisations.map((each) => each.organisationId)
  const studyIds = [...actor.laboratories, ...actor.committees].map((each) => each.studyId)
  return db
    .selectFrom('study')
    .innerJoin('organisation', 'organisation.organisation_id', 'study.organisation_id')
    .innerJoinLateral(
      (from) =>
        from
          .selectFrom('study_state')
          .select(['study_state.state', 'study_state.entered_at'])
          .whereRef('study_state.study_id', '=', 'study.study_id')
          .orderBy('study_state.number', 'desc')
          .limit(1)
          .as('state'),
      (join) => join.onTrue(),
    )
    .innerJoinLateral(
      (from) =>
        from
          .selectFrom('study_deadline')
          .select(['study_deadline.due_at', 'study_deadline.zone', 'study_deadline.local_time'])
          .whereRef('study_deadline.study_id', '=', 'study.study_id')
          .orderBy('study_deadline.number', 'desc')
          .limit(1)
          .as('deadline'),
      (join) => join.onTrue(),
    )
    .where((where) =>
      where.or([
        where('study.organisation_id', '=', sql<string>`any(${organisationIds}::uuid[])`),
        where('study.study_id', '=', sql<string>`any(${studyIds}::uuid[])`),
      ]),
    )
    .select([
      'study.study_id',
      'study.organisation_id',
      'organisation.name as organisation',
      'study.short_name',
      'study.title',
      'study.method',
      'study.purpose',
      'study.limit_factor',
      'state.state',
      'state.entered_at',
      'deadline.due_at',
      'deadline.zone',
      'deadline.local_time',
    ])
}

type StudyRow = Awaited<ReturnType<ReturnType<typeof selectStudies>['executeTakeFirstOrThrow']>>

function toStudy(row: StudyRow): StudyRecord {
  return {
    studyId: row.study_id,
    organisationId: row.organisation_id,
    organisation: row.organisation,
    shortName: row.short_name,
    title: row.title,
    method: row.method,
    purpose: row.purpose,
    limitFactor: row.limit_factor,
    state: row.state as StudyState,
    stateSince: row.entered_at,
    deadline: { at: row.due_at.toISOString(), dueAt: row.due_at, zone: row.zone, localTime: row.local_time },
  }
}

/** Ids arrive from addresses typed by anyone; what is no uuid is no study. */
export function isUuid(text: string): boolean {
  return /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/.test(text)
}

export async function readLayout(db: Kysely<DB>, studyId: string): Promise<StudyLayoutRecord> {
  const [measurands, materials, levels] = await Promise.all([
    db
      .selectFrom('measurand')
      .select(['measurand_id as measurandId', 'name', 'unit', 'decimals', 'has_true_zero as hasTrueZero'])
      .where('study_id', '=', studyId)
      .orderBy('position')
      .execute(),
    db
      .selectFrom('material')
      .select(['material_id as materialId', 'name', 'description'])
      .where('study_id', '=', studyId)
      .orderBy('position')
      .execute(),
    db
      .selectFrom('nesting_level')
      .select(['name', 'count'])
      .where('study_id', '=', studyId)
      .orderBy('position')
      .execute(),
  ])
  return { measurands, materials, levels }
}

export async function insertStudy(
  trx: Transaction<DB>,
  { organisationId, plan, createdBy }: { organisationId: string; plan: StudyPlan; createdBy: string },
): Promise<string> {
  const { study_id } = await trx
    .insertInto('study')
    .values({ ...planColumns(plan), organisation_id: organisationId, created_by: createdBy })
    .returning('study_id')
    .executeTakeFirstOrThrow()
  return study_id
}

export async function updateStudy(trx: Transaction<DB>, studyId: string, plan: StudyPlan): Promise<void> {
  await trx.updateTable('study').set(planColumns(plan)).where('study_id', '=', studyId).execute()
}

function planColumns(plan: StudyPlan) {
  return {
    short_name: plan.shortName,
    title: plan.title,
    method: plan.method,
    purpose: plan.purpose,
    limit_factor: plan.limitFactor,
  }
}

/** Puts the layout of a plan in place of whatever a draft had. */
export async function replaceLayout(trx: Transaction<DB>, studyId: string, plan: StudyPlan): Promise<void> {
  await trx.deleteFrom('measurand').where('study_id', '=', studyId).execute()
  await trx.deleteFrom('material').where('study_id', '=', studyId).execute()
  await trx.deleteFrom('nesting_level').where('study_id', '=', studyId).execute()
  await trx
    .insertInto('measurand')
    .values(
      plan.measurands.map((each, position) => ({
        study_id: studyId,
        position,
        name: each.name,
        unit: each.unit,
        decimals: each.decimals,
        has_true_zero: each.hasTrueZero,
      })),
    )
    .execute()
  await trx
    .insertInto('material')
    .values(
      plan.materials.map((each, position) => ({
        study_id: studyId,
        position,
        name: each.name,
        description: each.description,
      })),
    )
    .execute()
  await trx
    .insertInto('nesting_level')
    .values(
      plan.levels.map((each, position) => ({
        study_id: studyId,
        position,
        name: each.name,
        count: each.count,
      })),
    )
    .execute()
}

export async function insertState(
  trx: Transaction<DB>,
  {
    studyId,
    state,
    personId,
    reason,
  }: { studyId: string; state: StudyState; personId: string; reason?: string },
): Promise<void> {
  await trx
    .insertInto('study_state')
    .values((values) => ({
      study_id: studyId,
      number: values
        .selectFrom('study_state')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', studyId),
      state,
      entered_by: personId,
      reason: reason ?? null,
    }))
    .execute()
}

export async function insertDeadline(
  trx: Transaction<DB>,
  { studyId, deadline, personId }: { studyId: string; deadline: Deadline; personId: string },
): Promise<void> {
  await trx
    .insertInto('study_deadline')
    .values((values) => ({
      study_id: studyId,
      number: values
        .selectFrom('study_deadline')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', studyId),
      due_at: deadline.at,
      zone: deadline.zone,
      local_time: deadline.localTime,
      set_by: personId,
    }))
    .execute()
}
