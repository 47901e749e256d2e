import { findInvitation, findInvitationLink, findInvitedStudy } from '@/db/queries/laboratories'
import { readLayout } from '@/db/queries/studies'
import type { AnonymousContext } from '@/lib/context'
import { showTime, type ShownTime } from '@/lib/domain/show-time'

/**
 * What stands behind a mailed invitation link. The link is no session: nothing here names a laboratory, a
 * code, or anything the laboratory has stored.
 */
export type InvitationView =
  | { state: 'unknown' }
  | {
      state: 'open' | 'accepted' | 'declined' | 'superseded' | 'closed'
      study: { shortName: string; title: string; method: string; purpose: string; organisation: string }
      deadline: ShownTime
      asked: { measurands: string[]; materials: number; results: number }
    }

export async function readInvitation(
  context: AnonymousContext,
  { token }: { token: string },
): Promise<InvitationView> {
  const found = await locateInvitation(context, token)
  if (!found) return { state: 'unknown' }
  const { link, invitation, study } = found
  const layout = await readLayout(context.db, link.studyId)
  const perMaterial = layout.levels.reduce(
    (product, level) => product * level.count,
    layout.measurands.length,
  )
  return {
    state:
      invitation.answer ??
      (link.superseded
        ? 'superseded'
        : study.state !== 'open' || study.now > study.dueAt
          ? 'closed'
          : 'open'),
    study: {
      shortName: study.shortName,
      title: study.title,
      method: study.method,
      purpose: study.purpose,
      organisation: study.organisation,
    },
    deadline: showTime(study.dueAt, invitation.zone),
    asked: {
      measurands: layout.measurands.map(({ name, unit }) => `${name} (${unit})`),
      materials: layout.materials.length,
      results: perMaterial * layout.materials.length,
    },
  }
}

/** The link's rows, or undefined for anything that is no link of ours. */
export async function locateInvitation(context: AnonymousContext, token: string) {
  const parsed = /^([0-9a-f-]{36}\.\d{1,6})\.([\w-]{20,200})$/.exec(token)
  if (!parsed?.[1] || !parsed[2]) return undefined
  const link = await findInvitationLink(context.db, context.secrets.hash(parsed[2]))
  if (!link || `${link.invitationId}.${link.number}` !== parsed[1]) return undefined
  const [invitation, study] = await Promise.all([
    findInvitation(context.db, link),
    findInvitedStudy(context.db, link.studyId),
  ])
  return invitation && study ? { link, invitation, study } : undefined
}
