import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import type { Actor, CommitteeRole } from '@/lib/domain/actor'

export interface Person {
  readonly personId: string
  readonly name: string
  readonly address: string
}

/** A person with every role held now, in one round trip. */
export async function findActorOfPerson(db: Kysely<DB>, personId: string): Promise<Actor | null> {
  const { rows } = await sql<ActorRow>`
    select u.id as person_id, coalesce(u.name, u.email) as name, u.email as address,
      (select coalesce(json_agg(json_build_object('organisationId', m.organisation_id, 'role', m.role)
          order by m.organisation_id, m.role), '[]')
        from vault.organisation_member m where m.person_id = u.id) as organisations,
      (select coalesce(json_agg(json_build_object('studyId', c.study_id, 'participantId', c.participant_id)
          order by c.study_id, c.participant_id), '[]')
        from vault.contact c where c.person_id = u.id) as laboratories,
      (select coalesce(json_agg(json_build_object('studyId', b.study_id, 'role', b.role)
          order by b.study_id), '[]')
        from vault.committee_member b where b.person_id = u.id) as committees
    from vault."User" u where u.id = ${personId}
  `.execute(db)
  const row = rows[0]
  if (!row) return null
  const { person_id, name, address, organisations, laboratories, committees } = row
  return { personId: person_id, name, address, organisations, laboratories, committees }
}

interface ActorRow {
  person_id: string
  name: string
  address: string
  organisations: { organisationId: string; role: 'administrator' | 'coordinator' }[]
  laboratories: { studyId: string; participantId: string }[]
  committees: { studyId: string; role: CommitteeRole }[]
}

/** @param address in the form `readMailAddress` gives it */
export async function findPersonByAddress(db: Kysely<DB>, address: string): Promise<Person | undefined> {
  return db
    .selectFrom('vault.User')
    .select(['id as personId', sql<string>`coalesce(name, email)`.as('name'), 'email as address'])
    .where('email', '=', address)
    .executeTakeFirst()
}

/** The person with this address; a new one when there is none. A name once given is not overwritten. */
export async function ensurePerson(
  trx: Transaction<DB>,
  { address, name }: { address: string; name: string },
): Promise<{ personId: string; isNew: boolean }> {
  const made = await trx
    .insertInto('vault.User')
    .values({ email: address, name })
    .onConflict((conflict) => conflict.column('email').doNothing())
    .returning('id')
    .executeTakeFirst()
  if (made) return { personId: made.id, isNew: true }
  const known = await trx
    .selectFrom('vault.User')
    .select('id')
    .where('email', '=', address)
    .executeTakeFirstOrThrow()
  return { personId: known.id, isNew: false }
}

export async function insertOrganisation(trx: Transaction<DB>, name: string): Promise<string> {
  const made = await trx
    .insertInto('organisation')
    .values({ name })
    .returning('organisation_id')
    .executeTakeFirstOrThrow()
  return made.organisation_id
}

export async function findOrganisationByName(db: Kysely<DB>, name: string): Promise<string | undefined> {
  const found = await db
    .selectFrom('organisation')
    .select('organisation_id')
    .where(sql<boolean>`lower(name) = lower(${name})`)
    .executeTakeFirst()
  return found?.organisation_id
}

/** False when the person already holds the role. */
export async function insertOrganisationMember(
  trx: Transaction<DB>,
  {
    organisationId,
    personId,
    role,
  }: { organisationId: string; personId: string; role: 'administrator' | 'coordinator' },
): Promise<boolean> {
  const made = await trx
    .insertInto('vault.organisation_member')
    .values({ organisation_id: organisationId, person_id: personId, role })
    .onConflict((conflict) => conflict.columns(['organisation_id', 'person_id', 'role']).doNothing())
    .returning('person_id')
    .executeTakeFirst()
  return made !== undefined
}

/** Those who are told what a laboratory asks of a study's coordinators. */
export async function listCoordinators(db: Kysely<DB>, organisationId: string): Promise<Person[]> {
  return db
    .selectFrom('vault.organisation_member as member')
    .innerJoin('vault.User as person', 'person.id', 'member.person_id')
    .select([
      'person.id as personId',
      sql<string>`coalesce(person.name, person.email)`.as('name'),
      'person.email as address',
    ])
    .where('member.organisation_id', '=', organisationId)
    .distinct()
    .orderBy('address')
    .execute()
}
