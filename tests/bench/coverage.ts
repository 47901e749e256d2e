import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { coverageFaults, coveragePoints, simulate } from '@/tests/statistics/coverage-simulation'

/* The intervals' coverage in full; the table replaces the one that stands beside the tests. */

const DRAWS = 20_000
const TABLE = join(import.meta.dirname, '../statistics/coverage.csv')

const lines = [
  `# Made by: npm run bench -- coverage. ${DRAWS} seeded draws a point; shares in per cent of draws.`,
  '# Components are variances over that of the replicate, outermost first.',
  'group,design,components,quantity,covered,lower limit above the truth,upper limit below the truth,within bounds',
]
const faults: string[] = []
for (const point of coveragePoints()) {
  for (const row of simulate(point, DRAWS)) {
    const own = coverageFaults(row)
    faults.push(...own)
    const shares = [row.covered, row.tooHigh, row.tooLow].map((share) => (100 * share).toFixed(2))
    const names = [point.group, point.design, point.components.join(' / '), row.what]
    lines.push([...names.map(quoted), ...shares, own.length === 0 ? 'yes' : 'no'].join(','))
  }
}
writeFileSync(TABLE, `${lines.join('\n')}\n`)
console.log(`coverage: ${lines.length - 3} rows of ${DRAWS} draws, ${faults.length} out of bounds`)
for (const fault of faults) console.log(`  ${fault}`)

function quoted(text: string): string {
  return text.includes(',') ? `"${text}"` : text
}
