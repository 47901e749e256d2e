import { writeFileSync } from 'node:fs'
import { parseArgs } from 'node:util'
import { TestRun } from '@/lib/commands/test-run'
import { deadlineModel } from './load/deadline-arrivals'
import { runLoad, type LoadFigures } from './load/load-run'
import { isValid, printHead, printLoad } from './load/print-load'

/*
 * The load of one deadline on the built product, with a database, a worker and a mail service of its own, on loopback.
 * Each arrival has its moment before the run begins, and its latency counts from there. Exit status 1: the run was invalid.
 *
 *   --seconds N    how much of the ten minutes is played; 120 by default, 600 is the whole
 *   --seed N       draws other moments and values; 1 by default
 *   --raw FILE     keeps every sample as JSON
 */
const { values } = parseArgs({
  options: {
    seconds: { type: 'string', default: '120' },
    seed: { type: 'string', default: '1' },
    raw: { type: 'string' },
  },
})
const [seconds, seed] = [Number(values.seconds), Number(values.seed)]
if (!(seconds >= 1 && seconds <= deadlineModel.seconds) || !Number.isInteger(seed)) {
  console.error(`Give --seconds from 1 to ${deadlineModel.seconds} and a whole number for --seed.`)
  process.exit(2)
}

const say = (line: string) => console.log(line)
const run = new TestRun(process.cwd(), say)
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const)
  process.on(signal, () => void run.close().finally(() => process.exit(130)))

printHead({ seconds, full: deadlineModel.seconds, seed }, say)
try {
  const figures = await runLoad(run, { seconds, seed })
  if (!run.isClosing) report(figures)
} catch (failure) {
  // A run that is being ended loses its connections on the way, which is no news.
  if (!run.isClosing) throw failure
} finally {
  await run.close()
}

function report(figures: LoadFigures): void {
  printLoad(figures, say)
  if (values.raw) {
    const { probedQuiet, probedAnalysing } = figures
    const raw = { ...figures.requests.raw(), probedQuiet, probedAnalysing }
    writeFileSync(values.raw, JSON.stringify({ seconds, seed, raw }))
  }
  process.exitCode = isValid(figures) ? 0 : 1
}
