import type { Kysely, Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import type { Actor } from './domain/actor'
import type { QueueName } from './jobs/queues'

/** Puts a job into the queue as part of a transaction: the job exists if and only if the change does. */
export interface Jobs {
  enqueue(
    trx: Transaction<DB>,
    queue: QueueName,
    payload: Record<string, string | number>,
    options?: { afterSeconds?: number },
  ): Promise<void>
}

/** The system's random source; tests put a seeded one in its place. */
export interface Random {
  below(limit: number): number
  uuid(): string
}

/** Derives the secret part of a mailed link or code from a row's id, so that no store holds a usable one. */
export interface LinkSecrets {
  token(purpose: 'sign-in' | 'invitation', rowId: string): string
  code(requestId: string): string
  hash(secret: string): string
}

/** What a use case is given: who asks, and the parts of the world it may touch. */
export interface Context {
  readonly db: Kysely<DB>
  readonly actor: Actor
  readonly jobs: Jobs
  readonly random: Random
  readonly secrets: LinkSecrets
}

/** The same for what anyone may do without signing in, such as answering an invitation. */
export type AnonymousContext = Omit<Context, 'actor'>
