import type { Adapter, AdapterSession, AdapterUser } from '@auth/core/adapters'
import { KyselyAdapter, type KyselyAuth } from '@auth/kysely-adapter'
import type { Kysely } from 'kysely'
import { deleteSession, findClock, findSession, insertSession, touchSession } from '@/db/queries/sessions'
import { consumeVerificationToken } from '@/db/queries/sign-in'
import type { DB } from '@/db/tables'
import { absoluteDays, idleHours, makeSessionToken, readSessionToken } from './session-token'

/**
 * The library's adapter with four things changed: a session's token is stored only as its hash; the database's
 * clock decides what has ended; a verification token is written elsewhere, in the transaction of its mail; and
 * nobody comes into being by signing in.
 */
export function createAuthAdapter(db: Kysely<DB>): Adapter {
  const stock = KyselyAdapter(db.withSchema('vault') as unknown as KyselyAuth<never>)
  return {
    ...stock,

    createUser() {
      throw new Error('people are added by coordinators and invitations, not by signing in')
    },

    createVerificationToken: async (verification) => verification,

    async useVerificationToken({ identifier, token }) {
      const found = await consumeVerificationToken(db, { address: identifier, tokenHash: token })
      if (!found || found.secondsLeft <= 0) return null
      // The library compares with this machine's clock; the time left is right whatever that clock says.
      return { identifier, token, expires: new Date(Date.now() + found.secondsLeft * 1000) }
    },

    // The library's own token is replaced: ours carries its last moment.
    async createSession({ userId }) {
      const sessionToken = makeSessionToken(await findClock(db))
      const { hash, endsAt } = known(sessionToken)
      await insertSession(db, { hash, endsAt, personId: userId, idleHours })
      return { sessionToken, userId, expires: lastMomentHere() }
    },

    async getSessionAndUser(sessionToken) {
      const session = readSessionToken(sessionToken)
      const found = session && (await findSession(db, session))
      const user = found && (await stock.getUser?.(found.personId))
      if (!session || !user) return null
      return {
        session: { sessionToken, userId: user.id, expires: lastMomentHere() },
        user: user as AdapterUser,
      }
    },

    async updateSession({ sessionToken }) {
      const session = readSessionToken(sessionToken)
      if (session) await touchSession(db, { ...session, idleHours })
      return null
    },

    async deleteSession(sessionToken) {
      const session = readSessionToken(sessionToken)
      if (session) await deleteSession(db, session.hash)
    },
  }
}

/**
 * For the cookie, and for the library, which both go by clocks of their own; what has ended is decided by the
 * database and told by finding no session.
 */
function lastMomentHere(): Date {
  return new Date(Date.now() + absoluteDays * 86_400_000)
}

function known(sessionToken: AdapterSession['sessionToken']): { hash: string; endsAt: Date } {
  const read = readSessionToken(sessionToken)
  if (!read) throw new Error('a session token was made that cannot be read')
  return read
}
