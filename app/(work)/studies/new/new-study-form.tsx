import { ButtonLink } from '@/app/ui/primitives/button'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import type { BegunPlan } from '@/lib/domain/begin-plan'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { FormAction } from '../forms/action-form'
import { PlanForm } from '../forms/plan-form'

interface NewStudyFormProps {
  action: FormAction
  organisations: readonly { organisationId: string; name: string }[]
  /** The organisation chosen, where there are several. */
  chosen?: string
  begun: BegunPlan
  zones: readonly ZoneGroup[]
}

/** The plan form for one organisation; whoever works for several says first for which. */
export function NewStudyForm({ action, organisations, chosen, begun, zones }: NewStudyFormProps) {
  const only =
    organisations.length === 1
      ? organisations[0]
      : organisations.find((each) => each.organisationId === chosen)
  if (!only) {
    return (
      <EmptyState
        title="For which organisation?"
        action={
          <div className="flex flex-wrap gap-2">
            {organisations.map(({ organisationId, name }) => (
              <ButtonLink key={organisationId} href={`?organisation=${organisationId}`}>
                {name}
              </ButtonLink>
            ))}
          </div>
        }
      >
        You coordinate for several. The study belongs to one of them, and its coordinators see it.
      </EmptyState>
    )
  }
  return (
    <PlanForm
      action={action}
      hidden={{ organisationId: only.organisationId }}
      begun={begun}
      zones={zones}
      submit="Open the draft"
    />
  )
}
