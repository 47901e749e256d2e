import { listLaboratories } from '@/app/ui/analysis/consistency-data'
import { SetAsideTable } from '@/app/ui/analysis/set-aside-table'
import { Section } from '@/app/ui/layout/section'
import { Confirm } from '@/app/ui/primitives/confirm'
import type { MeasurandReview, ReviewView } from '@/lib/use-cases/reviews/read-review'
import { ReasonForm } from '../../forms/reason-form'
import { takeCellBackAction } from './actions'
import { ExcludeCellForm } from './exclude-cell-form'

interface CellDecisionsProps {
  studyId: string
  review: ReviewView
  measurand: MeasurandReview
  /** Decisions are taken between the close of returns and the committee's review. */
  isOpen: boolean
}

/** The cells set aside, and the form to set one more aside or take one back. */
export function CellDecisions({ studyId, review, measurand, isOpen }: CellDecisionsProps) {
  const { measurandId } = measurand
  return (
    <Section title="Cells set aside" note="Their values stay on record and are published with the reason.">
      <div className="flex flex-col gap-5">
        <SetAsideTable
          cells={measurand.exclusions}
          action={
            isOpen
              ? ({ code, material, materialId }) => (
                  <Confirm
                    label="Take back in"
                    variant="plain"
                    consequence={`The results of ${code} for ${material} will count again.`}
                  >
                    <ReasonForm
                      action={takeCellBackAction}
                      scope={`back-${code}-${materialId}`}
                      hidden={{ studyId, code, measurandId, materialId }}
                      submit="Take back in"
                      pendingLabel="Recording…"
                    />
                  </Confirm>
                )
              : undefined
          }
        />
        {isOpen ? (
          <Confirm
            label="Set a cell aside"
            variant="plain"
            consequence="The results of one laboratory for one material will not count. They stay on record, and the reason is published by code."
          >
            <ExcludeCellForm
              studyId={studyId}
              measurandId={measurandId}
              codes={listLaboratories(measurand.document)}
              materials={review.materials.map(({ materialId, name }) => ({ materialId, name }))}
            />
          </Confirm>
        ) : (
          <p className="text-small text-ink-soft">
            Cells can be set aside while the study is closed for returns and not yet before its committee.
          </p>
        )}
      </div>
    </Section>
  )
}
