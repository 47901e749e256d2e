import type { Kysely } from 'kysely'
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible'
import type { DB } from '@/db/tables'
import type { LinkSecrets } from '@/lib/context'
import { runStatement } from '@/lib/jobs/run-statement'

interface Asked {
  readonly address: string
  /** The address of the connection the request came by, or null when it is not known. */
  readonly peer: string | null
}

export interface SignInLimits {
  /** Counts a request. "address" says that this address has had its mails; "crowd" that there are too many in all. */
  take(asked: Asked): Promise<'free' | 'address' | 'crowd'>
  /** A person who signed in asked for nothing in vain, and is not counted. */
  giveBack(asked: Asked): Promise<void>
}

const hourSeconds = 3600

/** How many sign-in mails may be asked for in an hour: for one address, from one connection's address, in all. */
export function createSignInLimits(
  db: Kysely<DB>,
  secrets: LinkSecrets,
  {
    perAddress = 5,
    perPeer = 60,
    inAll = 2000,
  }: { perAddress?: number; perPeer?: number; inAll?: number } = {},
): SignInLimits {
  const limiter = (keyPrefix: string, points: number) =>
    new RateLimiterPostgres({
      storeClient: {
        query: ({ text, values }: { text: string; values: unknown[] }) => runStatement(db, text, values),
      },
      // Makes the library call `query` on what it is given, rather than look for a pool of its own.
      storeType: 'pool',
      schemaName: 'vault',
      tableName: 'rate_limit',
      tableCreated: true,
      keyPrefix,
      points,
      duration: hourSeconds,
      clearExpiredByTimeout: false,
    })
  const limits = {
    address: limiter('address', perAddress),
    peer: limiter('peer', perPeer),
    all: limiter('all', inAll),
  }
  // Whoever reads the table learns neither who asked nor from where.
  const key = (text: string) => secrets.hash(`limit.${text}`).slice(0, 32)

  return {
    async take({ address, peer }) {
      if (peer && !(await passes(limits.peer, key(peer)))) return 'crowd'
      if (!(await passes(limits.all, 'requests'))) return 'crowd'
      return (await passes(limits.address, key(address))) ? 'free' : 'address'
    },
    async giveBack({ address, peer }) {
      await limits.address.delete(key(address))
      if (peer) await limits.peer.reward(key(peer))
    },
  }
}

async function passes(limiter: RateLimiterPostgres, key: string): Promise<boolean> {
  try {
    await limiter.consume(key)
    return true
  } catch (refused) {
    if (refused instanceof RateLimiterRes) return false
    throw refused
  }
}
