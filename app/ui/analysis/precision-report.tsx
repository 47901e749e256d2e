import type { AnalysisDocument } from '@/lib/statistics/analysis-document'
import { Section } from '../layout/section'
import { Notice } from '../primitives/notice'
import { LevelRelationTable } from './level-relation-table'
import { CellMeans, VarianceShares } from './precision-plots'
import { IntervalTable, PrecisionTable } from './precision-table'
import { VarianceTables } from './variance-tables'

interface PrecisionReportProps {
  measurand: { name: string; unit: string; decimals: number; hasTrueZero: boolean; document: AnalysisDocument }
}

/** Everything the analysis says of one measurand's precision: the same on every page that shows it. */
export function PrecisionReport({ measurand }: PrecisionReportProps) {
  const { document, unit, decimals, hasTrueZero, name } = measurand
  return (
    <>
      <Cautions document={document} />
      <Section title={`Precision, ${name}`} note={`In ${unit}; rounded once, at the end, half to even.`}>
        <PrecisionTable document={document} unit={unit} hasTrueZero={hasTrueZero} />
      </Section>
      <Section title="95 % intervals" note="Of the standard deviations; how little a study of this size can settle.">
        <IntervalTable document={document} unit={unit} />
      </Section>
      <VarianceShares document={document} />
      <Section title="Analysis of variance" note="Material by material; open one to read it.">
        <VarianceTables document={document} unit={unit} />
      </Section>
      <Section title="Precision against level" note="s by the mean m, in the three forms of ISO 5725-2; the best by its scatter of logarithms is named, a person chooses.">
        <LevelRelationTable document={document} />
      </Section>
      <Section title="Laboratory means" note="Each with its standard deviation, and the curve that means of equal laboratories would follow.">
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
  const few = document.materials.filter(({ laboratories }) => laboratories < 6).map(({ material }) => material)
  const censored = document.materials.filter(({ censored: block }) => block.results > 0).map(({ material }) => material)
  return (
    <>
      {few.length > 0 && (
        <Notice tone="warn" title={`Fewer than six laboratories for ${few.join(', ')}`}>
          The figures then say little about laboratories at large (ASTM E691 asks for six or more).
        </Notice>
      )}
      {censored.length > 0 && (
        <Notice tone="warn" title={`Results below or above a limit for ${censored.join(', ')}`}>
          They carry no number and none is put in their place; their cells are left out of the means and the scatter, which makes the spread look smaller than it is.
        </Notice>
      )}
    </>
  )
}
