import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

const now = sql<Date>`clock_now()`

/** Records that an address asks to sign in. Its earlier request ends here, and what ended an hour ago is forgotten. */
export async function insertSignInRequest(
  trx: Transaction<DB>,
  request: { requestId: string; address: string; codeHash: string; lifetimeSeconds: number },
): Promise<void> {
  const anHourAgo = sql<Date>`clock_now() - interval '1 hour'`
  await trx
    .deleteFrom('vault.sign_in_request')
    .where((where) => where.or([where('address', '=', request.address), where('expires_at', '<', anHourAgo)]))
    .execute()
  await trx
    .insertInto('vault.sign_in_request')
    .values({
      request_id: request.requestId,
      address: request.address,
      code_hash: request.codeHash,
      expires_at: inSeconds(request.lifetimeSeconds),
    })
    .execute()
}

/** The one token by which this address may sign in: those before it end here. */
export async function replaceVerificationToken(
  trx: Transaction<DB>,
  { address, tokenHash, lifetimeSeconds }: { address: string; tokenHash: string; lifetimeSeconds: number },
): Promise<void> {
  // Two requests at one moment would otherwise each leave a token: neither sees the other's row.
  await sql`select pg_advisory_xact_lock(hashtextextended(${address}, 0))`.execute(trx)
  await trx
    .deleteFrom('vault.VerificationToken')
    .where((where) => where.or([where('identifier', '=', address), where('expires', '<', now)]))
    .execute()
  await trx
    .insertInto('vault.VerificationToken')
    .values({ identifier: address, token: tokenHash, expires: inSeconds(lifetimeSeconds) })
    .execute()
}

/** Takes the token away, and says for how long it would still have served; undefined when there is none. */
export async function consumeVerificationToken(
  db: Kysely<DB>,
  { address, tokenHash }: { address: string; tokenHash: string },
): Promise<{ secondsLeft: number } | undefined> {
  return db
    .deleteFrom('vault.VerificationToken')
    .where('identifier', '=', address)
    .where('token', '=', tokenHash)
    .returning(sql<number>`extract(epoch from expires - clock_now())::float8`.as('secondsLeft'))
    .executeTakeFirst()
}

export interface SignInRequest {
  readonly requestId: string
  readonly address: string
  readonly codeHash: string
}

/** The request of an address, while it lasts. */
export async function findLiveSignInRequest(
  db: Kysely<DB>,
  address: string,
): Promise<SignInRequest | undefined> {
  return db
    .selectFrom('vault.sign_in_request')
    .select(['request_id as requestId', 'address', 'code_hash as codeHash'])
    .where('address', '=', address)
    .where('expires_at', '>', now)
    .executeTakeFirst()
}

/** The address of a request whose mail is still wanted: a person's, not used, not replaced, not over. */
export async function unscopedFindSignInMail(
  db: Kysely<DB>,
  requestId: string,
): Promise<{ address: string } | undefined> {
  return db
    .selectFrom('vault.sign_in_request as request')
    .innerJoin('vault.VerificationToken as token', 'token.identifier', 'request.address')
    .innerJoin('vault.User as person', 'person.email', 'request.address')
    .select('request.address')
    .where('request.request_id', '=', requestId)
    .where('request.expires_at', '>', now)
    .executeTakeFirst()
}

/** Counts one try before it is judged. False when the five are used up. */
export async function insertCodeAttempt(db: Kysely<DB>, requestId: string): Promise<boolean> {
  // Tries at one moment draw the same number; all but one draw again, and no one gets a sixth.
  for (let draw = 0; draw < 6; draw += 1) {
    const { rows } = await sql<{ number: number }>`
      insert into vault.sign_in_code_attempt (request_id, number)
      select ${requestId}::uuid, count(*) + 1 from vault.sign_in_code_attempt where request_id = ${requestId}
      having count(*) < 5
      on conflict do nothing
      returning number
    `.execute(db)
    if (rows.length > 0) return true
  }
  return false
}

function inSeconds(seconds: number) {
  return sql<Date>`clock_now() + make_interval(secs => ${seconds})`
}
