export type CommitteeRole = 'chair' | 'member' | 'observer'

/** Who is asking, with every role the database gives this person now. */
export interface Actor {
  readonly personId: string
  readonly name: string
  readonly address: string
  readonly organisations: readonly { organisationId: string; role: 'administrator' | 'coordinator' }[]
  readonly laboratories: readonly { studyId: string; participantId: string }[]
  readonly committees: readonly { studyId: string; role: CommitteeRole }[]
}

export type Role = 'administrator' | 'coordinator' | 'contact' | CommitteeRole | 'anyone'

/** The row an action touches, as far as roles depend on it. */
export interface Target {
  readonly organisationId?: string
  readonly studyId?: string
  readonly participantId?: string
}

/** The roles an actor holds towards one row; everyone, signed in or not, is "anyone". */
export function rolesTowards(actor: Actor | null, target: Target): ReadonlySet<Role> {
  const roles = new Set<Role>(['anyone'])
  if (!actor) return roles
  for (const { organisationId, role } of actor.organisations)
    if (organisationId === target.organisationId) roles.add(role)
  for (const { studyId, participantId } of actor.laboratories)
    if (studyId === target.studyId && (!target.participantId || participantId === target.participantId))
      roles.add('contact')
  for (const { studyId, role } of actor.committees) if (studyId === target.studyId) roles.add(role)
  return roles
}
