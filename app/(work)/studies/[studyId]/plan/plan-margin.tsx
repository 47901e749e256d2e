import { MarginNote } from '@/app/ui/layout/margin'

/** What a careful colleague would pencil beside a plan. */
export function PlanMargin({ isDraft }: { isDraft: boolean }) {
  return (
    <>
      <MarginNote title="What happens next">
        <p>
          {isDraft
            ? 'Name the laboratories, then send the invitations. From then on the plan stands.'
            : 'The plan stands since the invitations were sent: what a laboratory was asked does not change under its hands.'}
        </p>
      </MarginNote>
      <MarginNote title="Limits">
        <p>
          r = f·s<sub>r</sub> and R = f·s<sub>R</sub>, with f the factor chosen here. 2.8 is 1.96·√2 rounded.
        </p>
      </MarginNote>
      <MarginNote title="Half-width">
        <p>
          Of 100 studies 95 find their s between two points about the true σ. Half the way from the one to the
          other, as a share of σ, is the half-width. ISO 5725-1 has it to first order, which serves where no
          level is nested.
        </p>
      </MarginNote>
      <MarginNote title="Deadline">
        <p>
          Kept as meant: the day and hour in the zone you chose. Clock changes are settled here, not guessed
          later.
        </p>
      </MarginNote>
    </>
  )
}
