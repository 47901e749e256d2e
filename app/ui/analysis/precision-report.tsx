import type { AnalysisDocument } from '@/lib/statistics/analysis-document'
import { Section } from '../layout/section'
import { Notice } from '../primitives/notice'
import { withinSentence } from '../primitives/within-sentence'
import { LevelRelationTable } from './level-relation-table'
import { CellMeans, VarianceShares } from './precision-plots'
import { IntervalTable, PrecisionTable } from './precision-table'
import { showFigures } from './show-quantity'
import { VarianceTables } from './variance-tables'

interface PrecisionReportProps {
  measurand: {
    name: string
    unit: string
    decimals: number
    hasTrueZero: boolean
    document: AnalysisDocument
  }
}

/** Everything the analysis says of one measurand's precision: the same on every page that shows it. */
export function PrecisionReport({ measurand }: PrecisionReportProps) {
  const { document, unit, decimals, hasTrueZero, name } = measurand
  return (
    <>
      <Cautions document={document} />
      <Section
        id="precision"
        title={`Precision: ${withinSentence(name)}`}
        note={`In ${unit}; rounded once, at the end, half to even.`}
      >
        <PrecisionTable document={document} unit={unit} hasTrueZero={hasTrueZero} />
      </Section>
      <Section
        id="intervals"
        title="95 % intervals"
        note="Of the standard deviations; how little a study of this size can settle."
      >
        <IntervalTable document={document} unit={unit} />
      </Section>
      <VarianceShares document={document} />
      <Section
        id="analysis-of-variance"
        title="Analysis of variance"
        note="Material by material; open one to read it."
      >
        <VarianceTables document={document} unit={unit} />
      </Section>
      <Section
        id="level"
        title="Precision against level"
        note="s by the mean m, in the three forms of ISO 5725-2; the best by its scatter of logarithms is named, a person chooses."
      >
        <LevelRelationTable document={document} />
      </Section>
      <Section
        id="means"
        title="Laboratory means"
        note="Each with its standard deviation, and the curve that means of equal laboratories would follow."
      >
        <div className="flex flex-col gap-8">
          {document.materials.map((material) => (
            <CellMeans key={material.material} material={material} unit={unit} decimals={decimals} />
          ))}
        </div>
      </Section>
    </>
  )
}

/** What must be said before a figure is used. */
function Cautions({ document }: { document: AnalysisDocument }) {
  const lost = document.materials.filter(({ censored, mean }) => censored.results > 0 && mean === null)
  const few = document.materials
    .filter((each) => each.laboratories < 6 && !lost.includes(each))
    .map(({ material }) => material)
  const censored = document.materials.filter((each) => each.censored.results > 0 && !lost.includes(each))
  const confounded = document.materials.find(({ anova }) => anova.confounded !== null)?.anova.confounded
  const isNested = document.input.nesting.length > 2
  return (
    <>
      {few.length > 0 && (
        <Notice tone="warn" title={`Fewer than six laboratories for ${few.join(', ')}`}>
          The figures then say little about laboratories at large (ASTM E691 asks for six or more).
        </Notice>
      )}
      {censored.length > 0 && (
        <Notice
          tone="warn"
          title={`Results below or above a limit for ${censored.map(({ material }) => material).join(', ')}`}
        >
          They carry no number and none is put in their place. Their cells are left out, which makes the
          spread look smaller than it is and moves the mean away from the limit: leaving out the lowest 5, 10
          or 20 % of laboratories lowers their standard deviation by 10, 16 or 24 %.
        </Notice>
      )}
      {lost.map(({ material, median, censored: block }) => (
        <Notice key={material} tone="warn" title={`No precision figures for ${material}`}>
          More than a tenth of its cells hold results below or above a limit ({block.cells.length} of them).
          {median !== null && ` The median of the cells is ${showFigures(median)}.`}
        </Notice>
      ))}
      {confounded && (
        <Notice tone="warn" title={`No repeatability: ${confounded} and replicate cannot be told apart`}>
          No innermost group holds two results, so that the innermost figure is an intermediate precision with{' '}
          {confounded} varying.
        </Notice>
      )}
      {isNested && (
        <Notice tone="info" title="In a nested layout h and Grubbs’ tests are approximate">
          They judge a laboratory’s mean over all its results; k and Cochran judge its innermost scatter, with
          exact critical values.
        </Notice>
      )}
    </>
  )
}
