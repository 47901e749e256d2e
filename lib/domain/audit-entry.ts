import { createHash } from 'node:crypto'

/**
 * What an audit entry says, one shape an action. These shapes are stored: add fields only with a new version.
 * None holds a laboratory's name or address; a laboratory is its code or the id of its row in the vault.
 */
export type AuditFact =
  | { action: 'organisation.created'; version: 1; name: string }
  | { action: 'member.added'; version: 1; personId: string; role: string }
  | { action: 'study.created'; version: 1; shortName: string; title: string }
  | { action: 'study.planned'; version: 1; before: unknown; after: unknown }
  | { action: 'study.opened'; version: 1; invitations: number }
  | { action: 'study.closed'; version: 1; reason: string | null; returned: number; expected: number }
  | { action: 'study.reopened'; version: 1; reason: string }
  | { action: 'study.sent-to-review'; version: 1; analysisId: string }
  | { action: 'study.taken-back'; version: 1; reason: string }
  | { action: 'deadline.set'; version: 1; before: unknown; after: unknown }
  | { action: 'laboratory.invited'; version: 1; invitationId: string }
  | { action: 'laboratory.re-sent'; version: 1; invitationId: string; link: number }
  | { action: 'laboratory.corrected'; version: 1; invitationId: string; link: number | null }
  // Not which code it drew: an entry with both would be the key.
  | { action: 'laboratory.accepted'; version: 1; invitationId: string }
  | { action: 'laboratory.declined'; version: 1; invitationId: string }
  | { action: 'extension.requested'; version: 1; participantId: string }
  | { action: 'extension.granted'; version: 1; participantId: string; dueAt: string; reason: string }
  | { action: 'committee.appointed'; version: 1; personId: string; role: string }
  | { action: 'committee.dismissed'; version: 1; personId: string }
  | { action: 'key.read'; version: 1; codes: number }
  | { action: 'upload.received'; version: 1; participantId: string; uploadId: string; sha256: string }
  | {
      action: 'return.submitted'
      version: 1
      participantId: string
      returnId: string
      number: number
      results: number
      bodyDigest: string
    }
  | {
      action: 'cell.excluded'
      version: 1
      exclusionId: string
      participantId: string
      measurandId: string
      materialId: string
      reason: string
    }
  | { action: 'cell.taken-back'; version: 1; exclusionId: string; reason: string }
  | { action: 'analysis.requested'; version: 1; number: number }
  | {
      action: 'analysis.made'
      version: 1
      analysisId: string
      number: number
      digest: string
      engineVersion: string
    }
  | { action: 'publication.proposed'; version: 1; proposalId: string; analysisId: string; digest: string }
  | { action: 'publication.proposal-withdrawn'; version: 1; proposalId: string; reason: string }
  | { action: 'publication.confirmed'; version: 1; proposalId: string; digest: string; slug: string }

/** One link of a study's chain. */
export interface AuditEntry {
  readonly studyId: string
  readonly sequence: number
  /** Database time, ISO 8601 with milliseconds. */
  readonly at: string
  readonly actorId: string | null
  readonly actorRole: string
  readonly action: string
  readonly version: number
  /** Canonical JSON of the fact. */
  readonly body: string
  readonly previousHash: string
  readonly hash: string
}

/** The hash before the first entry. */
export const chainStart = '0'.repeat(64)

/** Changes that belong to no study are chained under this id. */
export const houseChain = '00000000-0000-0000-0000-000000000000'

/** SHA-256 over the previous hash and every field of the entry, so that none can be changed unseen. */
export function hashEntry(entry: Omit<AuditEntry, 'hash'>): string {
  const content = [
    entry.studyId,
    entry.sequence,
    entry.at,
    entry.actorId,
    entry.actorRole,
    entry.action,
    entry.version,
    entry.body,
  ]
  return createHash('sha256').update(entry.previousHash).update(canonicalJson(content)).digest('hex')
}

/** JSON with its keys in order and no spaces: the same value always gives the same bytes (after RFC 8785). */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map((member) => canonicalJson(member ?? null)).join(',')}]`
  if (value !== null && typeof value === 'object') {
    const members = Object.entries(value)
      .filter(([, member]) => member !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : 1))
    return `{${members.map(([key, member]) => `${JSON.stringify(key)}:${canonicalJson(member)}`).join(',')}}`
  }
  return JSON.stringify(value)
}

/** The first entry at which a chain breaks, with the reason, or null when it holds. */
export function findBreak(
  entries: readonly AuditEntry[],
  head: { sequence: number; hash: string } | null,
): { sequence: number; reason: string } | null {
  let previousHash = chainStart
  let expected = 1
  for (const entry of entries) {
    if (entry.sequence !== expected) return { sequence: expected, reason: `entry ${expected} is missing` }
    if (entry.previousHash !== previousHash)
      return { sequence: expected, reason: `entry ${expected} does not follow the one before it` }
    if (hashEntry(entry) !== entry.hash)
      return { sequence: expected, reason: `entry ${expected} was changed` }
    previousHash = entry.hash
    expected += 1
  }
  const last = expected - 1
  if (head && head.sequence > last)
    return {
      sequence: expected,
      reason: `the chain once reached entry ${head.sequence}, and entries after ${last} are missing`,
    }
  if (head && head.sequence < last)
    return {
      sequence: head.sequence + 1,
      reason: `entry ${head.sequence + 1} was added past the end of the chain`,
    }
  if (head && head.hash !== previousHash)
    return { sequence: last, reason: `entry ${last} is not the one the chain ended with` }
  return null
}
