import type { Kysely } from 'kysely'
import { findActorOfPerson } from '@/db/queries/people'
import { findSession, touchSession } from '@/db/queries/sessions'
import type { DB } from '@/db/tables'
import type { Actor } from '@/lib/domain/actor'
import { idleHours, readSessionToken } from './session-token'

/** Who holds this session token, with the roles of this moment; null when nobody does, or no longer. */
export async function findActor(db: Kysely<DB>, token: string | undefined): Promise<Actor | null> {
  const session = readSessionToken(token)
  if (!session) return null
  const found = await findSession(db, session)
  if (!found) return null
  if (found.isDueForTouch) await touchSession(db, { ...session, idleHours })
  return findActorOfPerson(db, found.personId)
}
