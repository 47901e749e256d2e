import { createHmac, hkdfSync } from 'node:crypto'
import type { LinkSecrets } from '@/lib/context'

/**
 * Derives what is mailed from the ids of rows. Each purpose has a key of its own, so that a token made for one is
 * worth nothing for another; stored hashes are keyed too, since an eight-digit code could be tried out otherwise.
 */
export function createLinkSecrets(authSecret: string): LinkSecrets {
  const keys = {
    'sign-in': purposeKey(authSecret, 'sign-in token'),
    invitation: purposeKey(authSecret, 'invitation token'),
    code: purposeKey(authSecret, 'sign-in code'),
    hash: purposeKey(authSecret, 'stored hash'),
  }
  return {
    token: (purpose, rowId) => mac(keys[purpose], rowId).toString('base64url'),
    code: (requestId) => {
      const number = mac(keys.code, requestId).readBigUInt64BE() % 100_000_000n
      return number.toString().padStart(8, '0')
    },
    hash: (secret) => mac(keys.hash, secret).toString('hex'),
  }
}

/** A key of 256 bits for one purpose (RFC 5869). */
export function purposeKey(authSecret: string, purpose: string): Buffer {
  return Buffer.from(hkdfSync('sha256', authSecret, 'evenlot', purpose, 32))
}

function mac(key: Buffer, text: string): Buffer {
  return createHmac('sha256', key).update(text).digest()
}
