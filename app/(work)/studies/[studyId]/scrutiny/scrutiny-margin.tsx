import { beyond } from '@/app/ui/analysis/consistency-data'
import { describeNoticed } from '@/app/ui/analysis/describe-noticed'
import { describeProposal } from '@/app/ui/analysis/describe-proposal'
import { showStatistic } from '@/app/ui/analysis/show-quantity'
import { MarginNote } from '@/app/ui/layout/margin'
import { Tag } from '@/app/ui/primitives/tag'
import type { MeasurandReview } from '@/lib/use-cases/reviews/read-review'

const most = 4

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
  const apart = listApart(document)
  return (
    <>
      {apart.slice(0, most).map(({ material, cell, h, k, proposal }) => (
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
          {proposal && <p>Worth asking: {describeProposal(proposal, unit)}</p>}
        </MarginNote>
      ))}
      {apart.length > most && (
        <MarginNote title={apart.length === most + 1 ? 'One more cell' : `${apart.length - most} more cells`}>
          <p>Filled in the plots and marked in the tables.</p>
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

/** The cells beyond a 1 % value, the furthest first; an explanation that fits several of them is told at the first. */
function listApart({ materials }: MeasurandReview['document']) {
  const told = new Set<string>()
  return materials
    .flatMap((material) =>
      material.cells.flatMap((cell) => {
        const h = beyond(material, cell, 'h')
        const k = beyond(material, cell, 'k')
        const best = material.proposals?.find(({ laboratory }) => laboratory === cell.laboratory)
        return (h && h !== '5 %') || (k && k !== '5 %')
          ? [{ material: material.material, cell, h, k, best, surprise: surpriseOf(cell) }]
          : []
      }),
    )
    .sort((a, b) => a.surprise - b.surprise)
    .map(({ best, ...one }) => {
      const key = best && `${best.laboratory} ${best.kind} ${best.detail} ${best.cells.join()}`
      const proposal = key && !told.has(key) ? best : undefined
      if (key) told.add(key)
      return { ...one, proposal }
    })
}

/** The smaller of the two p-values: the cell furthest out stands first. */
function surpriseOf({ hPValue, kPValue }: { hPValue: number | null; kPValue: number | null }): number {
  return Math.min(hPValue ?? 1, kPValue ?? 1)
}
