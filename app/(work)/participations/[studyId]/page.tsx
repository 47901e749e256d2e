import type { Metadata } from 'next'
import { Section } from '@/app/ui/layout/section'
import { MarginNote } from '@/app/ui/layout/margin'
import { readParticipation, type ParticipationView } from '@/lib/use-cases/returns/read-participation'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { LaboratoryPage } from '../laboratory-page'
import { orNotFound } from '@/lib/web/or-not-found'
import { requestExtensionAction } from './actions'
import { AskForTime } from './ask-for-time'
import { ClosedNotice } from './closed-notice'
import { NextStep } from './next-step'
import { ReceiptList } from './receipt-list'
import { WhatIsAsked } from './what-is-asked'

export const metadata: Metadata = { title: 'Your part in the study' }

export default async function ParticipationPage({ params }: { params: Promise<{ studyId: string }> }) {
  const actor = await requireActor()
  const { studyId } = await params
  const view = await orNotFound(readParticipation(await requestContext(), { studyId }))
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title={view.study.title}
      lead={leadOf(view)}
      margin={<Cautions />}
      isStart
    >
      <ClosedNotice view={view} />
      {view.canReturn && <NextStep view={view} />}
      {view.receipts.length > 0 && (
        <Section title="Returned so far" note="The latest return counts; earlier ones are kept.">
          <ReceiptList view={view} />
        </Section>
      )}
      <Section title="What is asked">
        <WhatIsAsked view={view} />
      </Section>
      {view.whyNot !== 'not-open' && (
        <Section id="more-time" title="More time">
          <AskForTime
            studyId={studyId}
            isLate={view.whyNot === 'after-deadline'}
            action={requestExtensionAction}
          />
        </Section>
      )}
    </LaboratoryPage>
  )
}

function leadOf({ places, due, dueDistance, canReturn }: ParticipationView): string {
  const results = places === 1 ? 'One result' : `${places} results`
  return canReturn
    ? `${results} are due on ${due.text} in ${due.zoneText}: ${dueDistance}.`
    : `${results} were due on ${due.text} in ${due.zoneText}.`
}

function Cautions() {
  return (
    <MarginNote title="Before you open the specimens">
      <p>
        Handle them by the supplier’s safety data sheet, by your local rules, and with the licences your
        laboratory needs for this material. What this page asks never goes before these.
      </p>
    </MarginNote>
  )
}
