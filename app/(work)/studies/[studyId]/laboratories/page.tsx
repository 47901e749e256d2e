import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import { listZones } from '@/lib/domain/list-zones'
import { readCommittee } from '@/lib/use-cases/committee/appoint-committee-member'
import { readLaboratories } from '@/lib/use-cases/laboratories/read-laboratories'
import { paths } from '@/lib/web/paths'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { CommitteeSection } from './committee-section'
import { doneWords } from './done-words'
import { InviteSection } from './invite-section'
import { LaboratoryList } from './laboratory-list'
import { SendInvitations } from './send-invitations'

export const metadata: Metadata = { title: 'Laboratories' }

interface LaboratoriesPageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<Record<string, string | string[] | undefined>>
}

export default async function LaboratoriesPage({ params, searchParams }: LaboratoriesPageProps) {
  const { studyId } = await params
  const { correct, done } = await searchParams
  const { actor, context, view } = await loadStudy(studyId)
  const [{ study, now, invitations }, { members }] = await Promise.all([
    readLaboratories(context, { studyId }),
    readCommittee(context, { studyId }),
  ])
  const mayInvite = study.state === 'draft' || study.state === 'open'
  const zones = listZones()
  const said = doneWords(done, invitations.length)

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="laboratories"
      title="Laboratories"
      lead="By name, with what became of each invitation. Their codes are not on this page."
      actions={
        <ButtonLink href={`${paths.station(studyId, 'laboratories')}/key`}>
          Which laboratory is which
        </ButtonLink>
      }
      margin={
        <>
          <MarginNote title="What happens next">
            <p>
              {study.state === 'draft'
                ? 'Nothing is sent until you send the invitations, all at once.'
                : 'A laboratory accepts through its link; accepting draws its code, once.'}
            </p>
          </MarginNote>
          <MarginNote title="Names and codes apart">
            <p>
              Whoever works with results sees codes, whoever writes to laboratories sees names. When each
              accepted is not shown here, since Results shows it by code.
            </p>
          </MarginNote>
          <MarginNote title="Mail">
            <p>
              A link goes to the invited address and to no other. Sending it again makes a new one, and the
              earlier stops working.
            </p>
          </MarginNote>
        </>
      }
    >
      {said && <Notice tone="done" title={said} isLive />}
      <Section title="Invited" id="list" note={`${invitations.length} on the list`}>
        <LaboratoryList
          study={study}
          invitations={invitations}
          correcting={[correct].flat()[0]}
          zones={zones}
        />
      </Section>
      {study.state === 'draft' && <SendInvitations study={study} now={now} count={invitations.length} />}
      {mayInvite && <InviteSection key={study.state} study={study} zones={zones} />}
      <CommitteeSection study={study} members={members} />
    </StudyFrame>
  )
}
