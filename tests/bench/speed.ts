import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { runProgram } from '@/lib/commands/run-program'
import { randomSource } from '@/tests/statistics/random-source'

/*
 * The core and R on the same files, one after the other on the same machine. Each is run several times by turns; what is
 * printed is the median.
 */
type Layout = {
  name: string
  laboratories: number
  materials: number
  days: number
  results: number
  parts: string
  reml: boolean
}

const LAYOUTS: readonly Layout[] = [
  layout('200 × 20 × 3', { laboratories: 200, materials: 20, results: 3 }),
  layout('nested 30 × 20 × 4 × 3', { laboratories: 30, materials: 20, days: 4, results: 3 }),
  layout('5,000 × 1 × 4', { laboratories: 5000, materials: 1, results: 4, parts: 'robust,reml,q' }),
  layout('10⁴ as 50 materials', { laboratories: 50, materials: 50, results: 4 }),
  layout('10⁵ as 50 materials', { laboratories: 500, materials: 50, results: 4 }),
  // Pairs are tested up to 1,000 laboratories, and lme4 would take a quarter of an hour here.
  layout('10⁶ as 50 materials', {
    laboratories: 5000,
    materials: 50,
    results: 4,
    parts: 'robust,q',
    reml: false,
  }),
]

/** How many times faster than R. */
const WANTED: Readonly<Record<string, number>> = { tests: 5, reml: 30 }

const TURNS = 3

type Run = { seconds: Record<string, number>; peak: number; deviance: number; check: number }

const folder = mkdtempSync(join(tmpdir(), 'bench-'))
try {
  const ours: Run[] = []
  for (const one of LAYOUTS) ours.push(await measured(one))
  growth(ours.slice(-3))
} finally {
  rmSync(folder, { recursive: true, force: true })
}

async function measured(one: Layout): Promise<Run> {
  const file = join(folder, 'results.csv')
  writeFileSync(file, drawn(one))
  const [core, r]: [Run[], Run[]] = [[], []]
  for (let turn = 0; turn < TURNS; turn += 1) {
    core.push(await runCore(one, file))
    r.push(await runR(one, file))
  }
  const [own, theirs] = [middle(core), middle(r)]
  print(one, own, theirs)
  return own
}

async function runCore({ days, parts }: Layout, file: string): Promise<Run> {
  const args = ['--import', 'tsx', 'tests/bench/measure-core.ts', file, days > 1 ? 'day' : '-', parts]
  return JSON.parse(await runProgram(process.execPath, args, { cwd: process.cwd() })) as Run
}

async function runR({ days, reml }: Layout, file: string): Promise<Run> {
  const args = ['tests/bench/layouts.R', file, days > 1 ? 'day' : '-', ...(reml ? [] : ['noreml'])]
  const printed = await runProgram('Rscript', args, { cwd: process.cwd() })
  const pairs = printed
    .trim()
    .split('\n')
    .map((line) => line.split(' ') as [string, string])
  const {
    peak = 0,
    deviance = 0,
    check = 0,
    ...seconds
  } = Object.fromEntries(pairs.map(([name, value]) => [name, Number(value)]))
  return { seconds, peak, deviance, check }
}

function middle(runs: readonly Run[]): Run {
  const names = Object.keys(runs[0]!.seconds)
  const seconds = Object.fromEntries(
    names.map((name) => [name, median(runs.map((run) => run.seconds[name]!))]),
  )
  return { ...runs[0]!, seconds, peak: median(runs.map(({ peak }) => peak)) }
}

function print({ name, days }: Layout, own: Run, theirs: Run): void {
  console.log(`\n${name}`)
  const reading = own.seconds['parsing']! + own.seconds['decimals']!
  line('reading', reading, theirs.seconds['reading'])
  for (const part of ['tests', 'reml', 'robust']) {
    if (own.seconds[part] !== undefined) line(part, own.seconds[part], theirs.seconds[part], WANTED[part])
  }
  for (const part of ['pairs', 'q', 'document'])
    if (own.seconds[part] !== undefined) line(part, own.seconds[part])
  const rest = own.seconds['decimals']! + own.seconds['tests']!
  console.log(
    `  ${'decimals and tests over parsing'.padEnd(32)} ${(rest / own.seconds['parsing']!).toFixed(2)} (wanted: 3 at most)`,
  )
  console.log(`  ${'peak memory, MiB'.padEnd(32)} ${own.peak.toFixed(0)}, R ${theirs.peak.toFixed(0)}`)
  // The R script's one-way part knows no inner level, as its figures hold for all results of a laboratory.
  if (days === 1) compare('checksum', own.check, theirs.check, 1e-9)
  if (own.seconds['reml'] !== undefined) compare('deviance', own.deviance, theirs.deviance, 1e-8)
}

function line(part: string, own: number, theirs?: number, wanted?: number): void {
  const beside =
    theirs === undefined ? '' : `   R ${theirs.toFixed(4)} s   ratio ${(theirs / own).toFixed(1)}`
  console.log(
    `  ${part.padEnd(10)} ${own.toFixed(4)} s${beside}${wanted === undefined ? '' : ` (wanted: ${wanted})`}`,
  )
}

function compare(what: string, own: number, theirs: number, tolerance: number): void {
  // lme4 stops a little short of the optimum; ours must not lie above it.
  const gap = (own - theirs) / Math.abs(theirs)
  console.log(
    `  ${what.padEnd(10)} ${Math.abs(gap) <= tolerance ? 'the same' : `apart by ${gap.toExponential(1)}`}`,
  )
}

/** Slope of log time against log number of results, over two powers of ten. */
function growth([least, , most]: readonly Run[]): void {
  console.log('\ngrowth exponent from 10⁴ to 10⁶ results (wanted: 1.1 at most; q apart)')
  for (const part of ['parsing', 'decimals', 'tests', 'robust', 'q']) {
    const exponent = Math.log10(most!.seconds[part]! / least!.seconds[part]!) / 2
    console.log(`  ${part.padEnd(10)} ${exponent.toFixed(2)}`)
  }
}

function drawn({ laboratories, materials, days, results }: Layout): string {
  const random = randomSource(laboratories * 1000 + materials)
  const lines = [days > 1 ? 'lab,material,day,value' : 'lab,material,value']
  for (let material = 1; material <= materials; material += 1) {
    for (let laboratory = 1; laboratory <= laboratories; laboratory += 1) {
      const own = 10 * material + 0.5 * random.normal()
      for (let day = 1; day <= days; day += 1) {
        const ofDay = own + (days > 1 ? 0.3 * random.normal() : 0)
        for (let result = 0; result < results; result += 1) {
          const path = days > 1 ? `L${laboratory},M${material},${day}` : `L${laboratory},M${material}`
          lines.push(`${path},${(ofDay + 0.3 * random.normal()).toFixed(3)}`)
        }
      }
    }
  }
  return `${lines.join('\n')}\n`
}

function layout(
  name: string,
  given: Partial<Layout> & Pick<Layout, 'laboratories' | 'materials' | 'results'>,
): Layout {
  return { name, days: 1, parts: 'robust,reml,pairs,q,document', reml: true, ...given }
}

function median(values: readonly number[]): number {
  return [...values].sort((one, other) => one - other)[Math.floor(values.length / 2)]!
}
