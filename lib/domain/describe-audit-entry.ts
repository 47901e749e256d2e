import type { AuditEntry, AuditFact } from './audit-entry'
import { showTime } from './show-time'

/** What the trail may be told in: the names and codes behind ids, and the zone of the study. */
export interface TrailWords {
  readonly subjects: ReadonlyMap<string, string>
  readonly zone: string
}

type Fact<Action extends AuditFact['action']> = Extract<AuditFact, { action: Action }>

/** One entry as a sentence: who did what. An action unknown here is named as it stands in the record. */
export function describeAuditEntry(entry: AuditEntry & { actor: string }, words: TrailWords): string {
  const deed = deeds[entry.action as AuditFact['action']] as
    ((fact: never, words: TrailWords) => string) | undefined
  const fact = { ...(JSON.parse(entry.body) as object), action: entry.action, version: entry.version }
  const done = deed ? deed(fact as never, words) : `did what is recorded as “${entry.action}”`
  return `${actorName(entry, words)} ${done}.`
}

/** A contact acts for a laboratory, which is told by its code where the entry has it. */
function actorName(entry: AuditEntry & { actor: string }, { subjects }: TrailWords): string {
  if (entry.actorRole === 'contact') {
    const code = subjects.get(String((JSON.parse(entry.body) as { participantId?: unknown }).participantId))
    return code ? `Laboratory ${code}` : 'A laboratory'
  }
  if (entry.actorId !== null) return entry.actor
  return entry.actorRole === 'invited laboratory' ? 'An invited laboratory' : `The ${entry.actorRole}`
}

const deeds: { [Action in AuditFact['action']]: (fact: Fact<Action>, words: TrailWords) => string } = {
  'organisation.created': ({ name }) => `founded the organisation “${name}”`,
  'member.added': ({ role }) => `added a person as ${role}`,
  'study.created': ({ shortName, title }) => `opened the draft ${shortName}, “${title}”`,
  'study.planned': ({ before, after }) => `changed the plan${changedParts(before, after)}`,
  'study.opened': ({ invitations }) => `sent ${counted(invitations, 'invitation')} and opened the study`,
  'study.closed': ({ reason, returned, expected }) =>
    `closed the study with ${returned} of ${expected} returned${because(reason)}`,
  'study.reopened': ({ reason }) => `reopened the study${because(reason)}`,
  'study.sent-to-review': () => 'put the study before its committee',
  'study.taken-back': ({ reason }) => `took the study back from its committee${because(reason)}`,
  'deadline.set': ({ before, after }) => `moved the deadline from ${moment(before)} to ${moment(after)}`,
  'laboratory.invited': () => 'put a laboratory on the list',
  'laboratory.re-sent': ({ link }) => `had a laboratory’s link sent again (link ${link})`,
  'laboratory.corrected': ({ link }) =>
    `corrected the contact of an invited laboratory${link === null ? '' : ` (link ${link} was sent)`}`,
  // Says neither code nor invitation; see the fact.
  'laboratory.accepted': () => 'accepted and drew its code',
  'laboratory.declined': () => 'declined',
  'extension.requested': () => 'asked for more time',
  'extension.granted': ({ participantId, dueAt, reason }, words) =>
    `gave ${laboratory(participantId, words)} time until ${showTime(dueAt, words.zone).text}${because(reason)}`,
  'committee.appointed': ({ personId, role }, { subjects }) =>
    `appointed ${subjects.get(personId) ?? 'a person'} to the committee as ${role}`,
  'committee.dismissed': ({ personId }, { subjects }) =>
    `dismissed ${subjects.get(personId) ?? 'a person'} from the committee`,
  'key.read': ({ codes }) => `read which laboratory is which (${counted(codes, 'code')})`,
  'upload.received': ({ sha256 }) => `sent a file to be checked (SHA-256 ${short(sha256)})`,
  'return.submitted': ({ number, results, bodyDigest }) =>
    `returned ${counted(results, 'result')}, version ${number} (digest ${short(bodyDigest)})`,
  'cell.excluded': ({ participantId, reason }, words) =>
    `set a cell of ${laboratory(participantId, words)} aside${because(reason)}`,
  'cell.taken-back': ({ reason }) => `took a cell back in${because(reason)}`,
  'analysis.requested': ({ number }) => `had analysis ${number} computed`,
  'analysis.made': ({ number, engineVersion, digest }) =>
    `made analysis ${number} with engine ${engineVersion} (digest ${short(digest)})`,
  'publication.proposed': ({ digest }) => `proposed publication (digest ${short(digest)})`,
  'publication.proposal-withdrawn': ({ reason }) => `withdrew the proposal${because(reason)}`,
  'publication.confirmed': ({ slug, digest }) =>
    `confirmed publication as “${slug}” (digest ${short(digest)})`,
}

/** Every action a trail can hold, to choose one from. */
export const auditActions = Object.keys(deeds) as readonly AuditFact['action'][]

function laboratory(participantId: string, { subjects }: TrailWords): string {
  const code = subjects.get(participantId)
  return code ? `laboratory ${code}` : 'a laboratory'
}

function because(reason: string | null): string {
  return reason ? `: “${reason.replace(/\.$/, '')}”` : ''
}

function short(digest: string): string {
  return `${digest.slice(0, 12)}…`
}

function counted(count: number, what: string): string {
  return `${count} ${what}${count === 1 ? '' : 's'}`
}

function moment(deadline: unknown): string {
  const { at, zone } = deadline as { at: string; zone: string }
  const { text, zoneText } = showTime(at, zone)
  return `${text} in ${zoneText}`
}

/** Which parts of a plan differ: ": title, materials". */
function changedParts(before: unknown, after: unknown): string {
  const [was, is] = [before as Record<string, unknown>, after as Record<string, unknown>]
  const parts = Object.entries(partNames).filter(([key]) => comparable(was[key]) !== comparable(is[key]))
  return parts.length > 0
    ? `: ${[...new Set(parts.map(([, name]) => name))].join(', ')}`
    : ' without altering it'
}

const partNames: Record<string, string> = {
  shortName: 'short name',
  title: 'title',
  method: 'method',
  purpose: 'purpose',
  limitFactor: 'factor of the limits',
  measurands: 'measurands',
  materials: 'materials',
  levels: 'levels',
  localTime: 'deadline',
  zone: 'deadline',
}

/** Rows are compared without their ids and in one order of keys. */
function comparable(value: unknown): string {
  if (!Array.isArray(value)) return String(value)
  const rows = value.map((row: object) =>
    Object.entries(row)
      .filter(([key]) => !key.endsWith('Id'))
      .sort(([a], [b]) => (a < b ? -1 : 1)),
  )
  return JSON.stringify(rows)
}
