import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { runProgram } from '@/lib/commands/run-program'
import { randomSource } from '@/tests/statistics/random-source'

/*
 * The core and R on the same files, one after the other on the same machine: three processes of each by turns, and several
 * turns in each process. What is printed is the median over the processes: of their first turn, and of the second half of
 * their turns, when both have their code compiled.
 */
type Layout = {
  name: string
  laboratories: number
  materials: number
  days: number
  results: number
  parts: string
  turns: number
}

const EVERY_PART = 'robust,reml,pairs,q,document'

const LAYOUTS: readonly Layout[] = [
  layout('200 × 20 × 3', { laboratories: 200, materials: 20, results: 3 }),
  layout('nested 30 × 20 × 4 × 3', { laboratories: 30, materials: 20, days: 4, results: 3 }),
  layout('5,000 × 1 × 4', { laboratories: 5000, materials: 1, results: 4, parts: 'robust,reml,q,document' }),
  layout('10⁴ as 50 materials', { laboratories: 50, materials: 50, results: 4 }),
  layout('10⁵ as 50 materials', { laboratories: 500, materials: 50, results: 4, turns: 12 }),
  // Pairs are tested up to 1,000 laboratories. The document is made by the command, which forgets what it has written.
  layout('10⁶ as 50 materials', {
    laboratories: 5000,
    materials: 50,
    results: 4,
    parts: 'robust,reml,q',
    turns: 6,
  }),
]

/** How many times faster than R. */
const WANTED: Readonly<Record<string, number>> = { tests: 5, reml: 30 }

const PROCESSES = 3

/** R has all compiled after the second of them. */
const R_TURNS = 6

/** Seconds by part. */
type Seconds = Record<string, number>

type Run = { first: Seconds; again: Seconds; peak: number; deviance: number; check: number }

const folder = mkdtempSync(join(tmpdir(), 'bench-'))
try {
  const ours: Run[] = []
  for (const one of LAYOUTS) ours.push(await measured(one))
  growth(ours.slice(-3))
  wholeCommand(join(folder, 'results.csv'))
} finally {
  rmSync(folder, { recursive: true, force: true })
}

async function measured(one: Layout): Promise<Run> {
  const file = join(folder, 'results.csv')
  writeFileSync(file, drawn(one))
  const [core, r]: [Run[], Run[]] = [[], []]
  for (let process = 0; process < PROCESSES; process += 1) {
    core.push(await runCore(one, file))
    r.push(await runR(one, file))
  }
  const [own, theirs] = [middle(core), middle(r)]
  print(one, own, theirs)
  return own
}

async function runCore({ days, parts, turns }: Layout, file: string): Promise<Run> {
  const level = days > 1 ? 'day' : '-'
  const args = ['--import', 'tsx', 'tests/bench/measure-core.ts', file, level, parts, String(turns)]
  const { seconds, ...rest } = JSON.parse(
    await runProgram(process.execPath, args, { cwd: process.cwd() }),
  ) as Omit<Run, 'first' | 'again'> & { seconds: Record<string, number[]> }
  return { ...rest, ...firstAndAgain(seconds) }
}

async function runR({ days, turns }: Layout, file: string): Promise<Run> {
  const args = ['tests/bench/layouts.R', file, days > 1 ? 'day' : '-', String(Math.min(turns, R_TURNS))]
  const lines = (await runProgram('Rscript', args, { cwd: process.cwd() })).trim().split('\n')
  const figures = Object.fromEntries(
    lines.map((line) => {
      const [name, ...values] = line.trim().split(' ')
      return [name!, values.map(Number)]
    }),
  )
  const { peak, deviance, check, ...seconds } = figures
  return { ...firstAndAgain(seconds), peak: peak![0]!, deviance: deviance![0]!, check: check![0]! }
}

function firstAndAgain(turns: Readonly<Record<string, readonly number[]>>): {
  first: Seconds
  again: Seconds
} {
  const each = (of: (values: readonly number[]) => number): Seconds =>
    Object.fromEntries(Object.entries(turns).map(([name, values]) => [name, of(values)]))
  return {
    first: each((values) => values[0]!),
    again: each((values) => median(values.slice(Math.ceil(values.length / 2)))),
  }
}

function middle(runs: readonly Run[]): Run {
  const over = (of: (run: Run) => Seconds): Seconds =>
    Object.fromEntries(
      Object.keys(of(runs[0]!)).map((name) => [name, median(runs.map((run) => of(run)[name]!))]),
    )
  return {
    ...runs[0]!,
    first: over(({ first }) => first),
    again: over(({ again }) => again),
    peak: median(runs.map(({ peak }) => peak)),
  }
}

function print({ name, days }: Layout, own: Run, theirs: Run): void {
  console.log(`\n${name}\n${''.padEnd(12)}first turn       R   ratio   later turns       R   ratio   wanted`)
  for (const part of ['reading', 'tests', 'reml', 'robust', 'pairs', 'q', 'document']) row(part, own, theirs)
  const overParsing = (seconds: Seconds): string =>
    ((seconds['decimals']! + seconds['tests']!) / seconds['parsing']!).toFixed(2)
  note(
    'decimals and tests over parsing',
    `${overParsing(own.first)} and ${overParsing(own.again)} (wanted: 3 at most)`,
  )
  if (own.again['document'] !== undefined) {
    const { document, robust, reml, q, pairs = 0, parsing } = own.again as Record<string, number>
    note(
      'document but for REML, robust, q, pairs over parsing',
      ((document! - robust! - reml! - q! - pairs) / parsing!).toFixed(1),
    )
  }
  note('peak memory, MiB', `${own.peak.toFixed(0)}, R ${theirs.peak.toFixed(0)}`)
  // The R script's one-way part knows no inner level, as its figures hold for all results of a laboratory.
  if (days === 1) compare('checksum', own.check, theirs.check, 1e-9)
  compare('deviance', own.deviance, theirs.deviance, 1e-8)
}

function row(part: string, own: Run, theirs: Run): void {
  const pair = (of: (run: Run) => Seconds): string => {
    const seconds = of(own)
    const ours = part === 'reading' ? seconds['parsing']! + seconds['decimals']! : seconds[part]
    const others = of(theirs)[part]
    if (ours === undefined) return ''
    if (others === undefined) return ours.toFixed(4).padStart(10)
    return `${ours.toFixed(4).padStart(10)}${others.toFixed(4).padStart(9)}${(others / ours).toFixed(1).padStart(7)}`
  }
  const first = pair((run) => run.first)
  if (first === '') return
  const wanted = WANTED[part] === undefined ? '' : String(WANTED[part])
  console.log(
    `  ${part.padEnd(10)}${first.padEnd(26)}  ${pair((run) => run.again).padEnd(26)}${wanted.padStart(9)}`.trimEnd(),
  )
}

function note(what: string, found: string): void {
  console.log(`  ${what}: ${found}`)
}

function compare(what: string, own: number, theirs: number, tolerance: number): void {
  // lme4 stops a little short of the optimum; ours must not lie above it.
  const gap = (own - theirs) / Math.abs(theirs)
  note(what, Math.abs(gap) <= tolerance ? 'the same' : `apart by ${gap.toExponential(1)}`)
}

/** Slope of log time against log number of results, over two powers of ten. */
function growth([least, , most]: readonly Run[]): void {
  console.log('\ngrowth exponent from 10⁴ to 10⁶ results (wanted: 1.1 at most; q apart)')
  for (const part of ['parsing', 'decimals', 'tests', 'reml', 'robust', 'q']) {
    const exponent = Math.log10(most!.again[part]! / least!.again[part]!) / 2
    note(part, exponent.toFixed(2))
  }
}

/** The command as it is called, from the file to the whole document's text. */
function wholeCommand(file: string): void {
  const began = performance.now()
  const { status, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', '--import', './tests/bench/report-peak.ts', 'lib/commands/analyse.ts', file],
    { stdio: ['ignore', 'ignore', 'pipe'], encoding: 'utf8' },
  )
  if (status !== 0) throw new Error(stderr)
  const seconds = (performance.now() - began) / 1000
  console.log('\nthe command on 10⁶ results, its document written out')
  note('seconds', seconds.toFixed(1))
  note('peak memory, MiB', `${Number(stderr.trim()).toFixed(0)} (wanted: 1024 at most)`)
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
  return { name, days: 1, parts: EVERY_PART, turns: 40, ...given }
}

function median(values: readonly number[]): number {
  return [...values].sort((one, other) => one - other)[Math.floor(values.length / 2)]!
}
