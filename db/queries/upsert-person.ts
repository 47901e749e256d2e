import type { Transaction } from 'kysely'
import type { DB } from '@/db/tables'

/** The person with this address, made when new; a name once given is kept. */
export async function upsertPerson(trx: Transaction<DB>, { address, name }: { address: string; name: string }): Promise<string> {
  await trx
    .insertInto('vault.User')
    .values({ email: address, name })
    .onConflict((conflict) => conflict.constraint('user_email_unique').doNothing())
    .execute()
  const { id } = await trx.selectFrom('vault.User').select('id').where('email', '=', address).executeTakeFirstOrThrow()
  return id
}
