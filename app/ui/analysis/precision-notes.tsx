import { MarginNote } from '../layout/margin'

/** The conventions behind the figures, as a careful colleague would pencil them in the margin. */
export function PrecisionNotes({ limitFactor }: { limitFactor: string }) {
  const factor = limitFactor === '2.77' ? '1.96·√2' : limitFactor
  return (
    <>
      <MarginNote title="What the figures mean">
        <p>
          s<sub>r</sub> is the scatter under repeatability conditions: one laboratory, shortly one after
          another. s<sub>L</sub> is what laboratories add, s<sub>R</sub> all of it together; s<sub>I</sub>{' '}
          lets the inner levels named with it vary. Two results differ by more than r (under repeatability
          conditions) or R (in two laboratories) in about one case in twenty.
        </p>
        <p>
          The limits are {factor} times the standard deviations. They describe how results agree; they are no
          specification.
        </p>
      </MarginNote>
      <MarginNote title="How they are computed">
        <p>
          By analysis of variance with the laboratory outermost (ISO 5725-2 and 5725-3), from single results
          centred exactly in decimals. A negative component counts as 0; its raw value is shown. Restricted
          likelihood stands beside it.
        </p>
      </MarginNote>
      <MarginNote title="How far they reach">
        <p>
          A precision statement speaks for the range of its materials and for laboratories like these, no
          further.
        </p>
      </MarginNote>
    </>
  )
}
