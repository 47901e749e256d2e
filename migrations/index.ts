import type { Migration } from 'kysely'
import * as foundation from './0001-foundation'

/** Every migration in order; forward only. A list, so that a bundler finds them too. */
export const migrations: Record<string, Migration> = {
  '0001-foundation': foundation,
}
