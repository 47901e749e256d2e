import { findOpenProposal, insertPublication } from '@/db/queries/publications'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { slugOf } from '@/lib/domain/publication-snapshot'
import { recordAudit } from '../record-audit'
import { changeStudyState } from '../studies/change-study-state'

/**
 * Publishes what another person proposed, bound to the digest that the confirming person was shown.
 * @throws {Refusal} `same-person`, `proposal-changed`
 */
export async function confirmPublication(
  context: Context,
  { studyId, digest }: { studyId: string; digest: string },
): Promise<{ slug: string }> {
  return changeStudyState(context, {
    studyId,
    action: 'publication.confirm',
    from: 'in-review',
    to: 'published',
    alongside: async (trx, study, role) => {
      const proposal = await findOpenProposal(trx, studyId)
      if (!proposal) throw new NotFound('proposal')
      if (proposal.proposedBy === context.actor.personId)
        throw new Refusal(
          'same-person',
          'You proposed this publication yourself; a second person confirms it.',
        )
      if (proposal.digest !== digest)
        throw new Refusal(
          'proposal-changed',
          'The proposal was replaced since you opened this page. Read it again before confirming.',
        )
      const { proposalId } = proposal
      const slug = await insertPublication(trx, {
        studyId,
        proposalId,
        slug: slugOf(study.shortName),
        proposedBy: proposal.proposedBy,
        personId: context.actor.personId,
      })
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'publication.confirmed', version: 1, proposalId, digest, slug },
      })
      return { slug }
    },
  })
}
