import { describeNoticed } from '@/app/ui/analysis/describe-noticed'
import { describeProposal } from '@/app/ui/analysis/describe-proposal'
import { showStatistic } from '@/app/ui/analysis/show-quantity'
import { MarginNote } from '@/app/ui/layout/margin'
import { Tag } from '@/app/ui/primitives/tag'
import type { MeasurandReview } from '@/lib/use-cases/reviews/read-review'
import { type Likelihood, listCellsApart } from './list-cells-apart'

const most = 4

const opening: Readonly<Record<Likelihood, string>> = {
  likeliest: 'Worth asking:',
  equal: 'As likely as the one above:',
  less: 'Less likely:',
}

/** The cells that lie furthest from the others, and how the figures beside them come about. */
export function ScrutinyMargin({ measurand }: { measurand: MeasurandReview | undefined }) {
  return (
    <>
      {measurand && <CellNotes measurand={measurand} />}
      <MarginNote title="How h is computed">
        <p>
          The mean of a cell less the mean of all cells, in units of their standard deviation. Its limits come
          from t with p − 2 degrees of freedom, two-sided.
        </p>
      </MarginNote>
      <MarginNote title="How k is computed">
        <p>
          The standard deviation of a cell over the repeatability standard deviation pooled by degrees of
          freedom; its limits are exact for any cell size.
        </p>
      </MarginNote>
      <MarginNote title="Who decides">
        <p>
          No result is ever left out by a test. A coordinator sets a cell aside with a written reason, after
          asking the laboratory.
        </p>
      </MarginNote>
    </>
  )
}

function CellNotes({ measurand: { document, unit } }: { measurand: MeasurandReview }) {
  const apart = listCellsApart(document)
  const shown = apart.slice(0, most)
  return (
    <>
      {shown.map(({ material, cell, h, k, explanations, isUnexplained }) => (
        <MarginNote
          key={`${cell.laboratory} ${material}`}
          title={
            <>
              <Tag code={cell.laboratory} /> {material}
            </>
          }
        >
          <p>
            This cell lies apart from the others:
            {h && ` h\u00a0=\u00a0${showStatistic(cell.h)}, beyond ${h}`}
            {h && k && ' and'}
            {k && ` k\u00a0=\u00a0${showStatistic(cell.k)}, beyond ${k}`}.
          </p>
          {explanations.map(({ likelihood, proposal }) => (
            <p key={`${proposal.kind} ${proposal.detail}`}>
              {opening[likelihood]} {describeProposal(proposal, unit)}
            </p>
          ))}
          {isUnexplained && <p>No simple explanation found.</p>}
        </MarginNote>
      ))}
      {apart.length > most && (
        <MarginNote title={apart.length === most + 1 ? 'One more cell' : `${apart.length - most} more cells`}>
          <p>Filled in the plots and marked in the tables.</p>
        </MarginNote>
      )}
      {shown.some(({ explanations }) => explanations.length > 0) && (
        <MarginNote title="How explanations are ordered">
          <p>
            Surprise counts the powers of ten by which the other laboratories would not have expected a mean
            and a scatter, over all cells that an explanation changes. It scores what it takes away, less a
            price for the number of others of its kind; those whose scores lie within 0.3 are equally likely.
          </p>
        </MarginNote>
      )}
      {document.materials.flatMap(({ material, noticed }) =>
        (noticed ?? []).map((one) => (
          <MarginNote
            key={`${one.laboratory} ${material} ${one.kind}`}
            title={
              <>
                <Tag code={one.laboratory} /> {one.kind !== 'trend' && material}
              </>
            }
          >
            <p>{describeNoticed(one, unit)}</p>
          </MarginNote>
        )),
      )}
    </>
  )
}
