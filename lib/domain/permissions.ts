import { NotFound } from './errors'
import { rolesTowards, type Actor, type Role, type Target } from './actor'

interface Permission {
  /** Completes "may …". */
  readonly phrase: string
  readonly roles: readonly Role[]
}

const coordinators = ['administrator', 'coordinator'] as const
const committee = ['chair', 'member', 'observer'] as const

/** Every action of the product, in words a person can be shown, and who may do it. Nothing else is allowed. */
export const permissions = {
  'organisation.administer': { phrase: 'add people to the organisation', roles: ['administrator'] },
  'study.create': { phrase: 'open a new study', roles: coordinators },
  'study.read': { phrase: 'see the study as its coordinator', roles: coordinators },
  'study.plan': { phrase: 'change the plan and the materials of a draft', roles: coordinators },
  'study.open': { phrase: 'send the invitations', roles: coordinators },
  'study.close': { phrase: 'close the study for returns', roles: coordinators },
  'study.review': { phrase: 'put the study before its committee, or take it back', roles: coordinators },
  'deadline.set': { phrase: 'set or move the deadline', roles: coordinators },
  'laboratory.invite': { phrase: 'invite a laboratory or send its link again', roles: coordinators },
  'laboratory.extend': { phrase: 'grant one laboratory more time', roles: coordinators },
  'committee.appoint': { phrase: 'name the members of the committee', roles: coordinators },
  'key.read': { phrase: 'see which laboratory stands behind a code', roles: coordinators },
  'return.watch': { phrase: 'see who has returned and who is late', roles: coordinators },
  'return.read': { phrase: "read the laboratory's own returns", roles: ['contact'] },
  'return.draft': { phrase: "keep a draft of the laboratory's results", roles: ['contact'] },
  'return.upload': { phrase: 'send a file of results to be checked', roles: ['contact'] },
  'return.submit': { phrase: "return the laboratory's results", roles: ['contact'] },
  'extension.request': { phrase: 'ask the coordinator for more time', roles: ['contact'] },
  'analysis.run': { phrase: 'have the statistics computed', roles: coordinators },
  'cell.exclude': { phrase: 'set a cell aside, or take it back in', roles: coordinators },
  'review.read': {
    phrase: 'read the coded results and the consistency plots',
    roles: [...coordinators, ...committee],
  },
  'publication.propose': { phrase: 'propose publication, or withdraw the proposal', roles: coordinators },
  'publication.confirm': { phrase: "confirm another person's proposal", roles: [...coordinators, 'chair'] },
  'publication.read': { phrase: 'read what is published', roles: ['anyone'] },
  'trail.read': { phrase: 'read the audit trail and verify it', roles: coordinators },
} as const satisfies Record<string, Permission>

export type Action = keyof typeof permissions

/**
 * The role by which the actor may do this to this row.
 * @throws {NotFound} when no role of the actor allows it: forbidden looks like absent.
 */
export function authorise(actor: Actor | null, action: Action, target: Target): Role {
  const role = permittedRole(actor, action, target)
  if (!role) throw new NotFound(action.split('.')[0] ?? action)
  return role
}

/** The same question without the refusal, for screens that show or hide a way in. */
export function permittedRole(actor: Actor | null, action: Action, target: Target): Role | undefined {
  const held = rolesTowards(actor, target)
  return (permissions[action].roles as readonly Role[]).find((role) => held.has(role))
}
