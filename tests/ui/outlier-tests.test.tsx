import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { OutlierTests } from '@/app/ui/analysis/outlier-tests'
import { analyse } from '@/lib/statistics'

/** Eight laboratories in duplicate, of which the last lies two units above the others. */
function document() {
  const means = [10.0, 10.1, 9.9, 10.05, 9.95, 10.02, 9.98, 12.0]
  return analyse({
    results: means.flatMap((mean, index) =>
      [0.01, -0.01].map((step) => ({
        laboratory: `B${index + 22}`,
        material: 'sisal',
        measurand: null,
        groups: [],
        text: (mean + step).toFixed(2),
        censored: null,
        excluded: false,
      })),
    ),
    nesting: [],
    settings: { limitFactor: 2.8 },
    sha256: '',
    version: '0',
  })
}

describe('the table of outlier tests', () => {
  // The two highest are the true outlier and an innocent neighbour; by itself the pair test calls both outliers.
  it('consults no pair where one end alone is an outlier, so that nobody beside it is called one', () => {
    const markup = renderToStaticMarkup(<OutlierTests document={document()} />)
    const rows = markup.split('<tr').filter((row) => row.includes('Grubbs'))
    expect(rows).toHaveLength(4)
    expect(rows.map((row) => />(outlier|straggler|not consulted|none)</.exec(row)?.[1])).toEqual([
      'outlier',
      'none',
      'not consulted',
      'not consulted',
    ])
  })
})
