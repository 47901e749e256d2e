import { createHash, randomBytes } from 'node:crypto'

/** A session ends 12 hours after it was last used, and 7 days after signing in however much it is used. */
export const idleHours = 12
export const absoluteDays = 7

/**
 * A new session's token. It carries its own last moment: only the hash of the whole is stored, so the end cannot
 * be moved without breaking the token.
 */
export function makeSessionToken(signedInAt: Date): string {
  const endsAtSeconds = Math.floor(signedInAt.getTime() / 1000) + absoluteDays * 86_400
  return `${randomBytes(32).toString('base64url')}.${endsAtSeconds}`
}

/** What the database knows a session by, and its last moment; null when the text is no session token. */
export function readSessionToken(token: string | undefined): { hash: string; endsAt: Date } | null {
  const match = /^[\w-]{43}\.(\d{10})$/.exec(token ?? '')
  if (!token || !match) return null
  return { hash: createHash('sha256').update(token).digest('hex'), endsAt: new Date(Number(match[1]) * 1000) }
}
