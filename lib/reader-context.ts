import type { Kysely } from 'kysely'
import type { DB } from '@/db/tables'
import type { Actor } from './domain/actor'

/** What use cases are given that show coded data: the connection that can name nobody, and who asks. */
export interface ReaderContext {
  readonly reader: Kysely<DB>
  readonly actor: Actor | null
}
