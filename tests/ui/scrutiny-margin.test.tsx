import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { ScrutinyMargin } from '@/app/(work)/studies/[studyId]/scrutiny/scrutiny-margin'
import type { Proposal } from '@/lib/statistics'
import { analyseRows, rowsOf } from '../statistics/analyse-rows'

// Seven laboratories that agree and one far above them, to which the test gives explanations of its own.
const document = analyseRows(
  rowsOf({
    M21: '10.1 10.3',
    M22: '10.2 10.1',
    M23: '10.4 10.3',
    M24: '10.2 10.4',
    M25: '14.9 15.1',
    M26: '10.0 10.2',
    M27: '10.3 10.2',
    M28: '10.3 10.5',
  }),
)

function proposal(detail: string, score: number): Proposal {
  const [before, after] = [
    { h: 2.45, k: 1.1, surprise: 9 },
    { h: 0.25, k: 1.1, surprise: 0.5 },
  ]
  return { laboratory: 'M25', kind: 'digits', detail, cells: ['M'], before, after, price: 0.3, score }
}

/** Each paragraph of the margin as its words. */
function paragraphs(proposals: Proposal[]): string[] {
  const materials = document.materials.map((one) => ({ ...one, proposals }))
  const markup = renderToStaticMarkup(
    <ScrutinyMargin
      measurand={{
        measurandId: '',
        name: 'ash',
        unit: 'g',
        decimals: 1,
        hasTrueZero: true,
        document: { ...document, materials },
        csv: '',
        exclusions: [],
      }}
    />,
  )
  return markup
    .split('<p>')
    .slice(1)
    .map((part) => part.slice(0, part.indexOf('</p>')))
}

describe('the margin beside the scrutiny', () => {
  it('shows equals as equals and a less likely explanation as such, with figures before and after', () => {
    const said = paragraphs([proposal('a', 8.2), proposal('b', 8), proposal('c', 5)])
    expect(said[1]).toBe(
      'Worth asking: Were two digits exchanged? Take a. Corrected so, the cell would fit the others: ' +
        'h\u00a0=\u00a00.250 instead of 2.450, k\u00a0=\u00a01.100, surprise\u00a00.5 instead of 9.0.',
    )
    expect(said[2]).toMatch(/^As likely as the one above: .*Take b\./)
    expect(said[3]).toMatch(/^Less likely: .*Take c\./)
    expect(said[4]).toContain('within 0.3 are equally likely')
  })

  it('says where no simple explanation was found, and then nothing of their order', () => {
    const said = paragraphs([])
    expect(said[1]).toBe('No simple explanation found.')
    expect(said.join(' ')).not.toContain('equally likely')
  })
})
