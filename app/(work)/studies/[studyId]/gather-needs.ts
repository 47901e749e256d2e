import { toReturnsAnswer } from '@/app/api/studies/[studyId]/returns/to-returns-answer'
import type { NeedsFacts } from '@/lib/domain/needs-today'
import type { LaboratoriesView } from '@/lib/use-cases/laboratories/read-laboratories'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import type { StudyView } from '@/lib/use-cases/studies/read-study'

interface Views {
  view: StudyView
  returns: ReturnsView
  laboratories: LaboratoriesView
}

/** The facts about a day of a study, from the three views in which they are read. No name goes along. */
export function gatherNeeds({ view, returns, laboratories }: Views): NeedsFacts {
  const answer = toReturnsAnswer(returns)
  const messages = new Map(returns.lanes.map(({ code, request }) => [code, request?.message ?? null]))
  return {
    ...view,
    round: {
      ...answer,
      lanes: answer.lanes.map((lane) => ({ ...lane, message: messages.get(lane.code) ?? null })),
    },
    invitations: laboratories.invitations.map(({ answer: said, lastLink, mail }) => ({
      answer: said,
      issuedAt: lastLink?.issuedAt ?? null,
      isRefused: mail?.outcome === 'refused',
    })),
  }
}
