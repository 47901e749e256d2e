import { spawn } from 'node:child_process'
import { ensureDebianPackages } from './debian-packages'

/*
 * What is measured and not tested: the speed of the numerical core beside R, the coverage of its intervals in full, and
 * what the whole product bears in the minutes before a deadline.
 *
 *   npm run bench                 the speed
 *   npm run bench -- coverage     the coverage; writes its table anew (a quarter of an hour)
 *   npm run bench -- load         the load of a deadline (five minutes; with --seconds 600 in full)
 *   npm run bench -- all          one after the other
 */
interface Benchmark {
  readonly script: string
  /** Debian packages that it cannot do without. */
  readonly packages: readonly string[]
}

const R = ['r-base-core', 'r-cran-lme4']

const BENCHMARKS: Readonly<Record<string, Benchmark>> = {
  speed: { script: 'tests/bench/speed.ts', packages: R },
  coverage: { script: 'tests/bench/coverage.ts', packages: R },
  load: { script: 'tests/bench/load.ts', packages: ['postgresql'] },
}

const [asked = 'speed', ...options] = process.argv.slice(2)
const chosen = asked === 'all' ? Object.values(BENCHMARKS) : [BENCHMARKS[asked]]
for (const benchmark of chosen) {
  if (benchmark === undefined) {
    console.error(`There is no benchmark ${asked}. There are: ${Object.keys(BENCHMARKS).join(', ')}, all.`)
    process.exit(2)
  }
  await ensureDebianPackages([...benchmark.packages], (line) => console.log(line))
  const code = await runScript(benchmark.script)
  if (code !== 0) process.exit(code)
}

/** A signal is passed on and not obeyed here: what the script has started is for the script to end. */
function runScript(script: string): Promise<number> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, ['--import', 'tsx', script, ...options], { stdio: 'inherit' })
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const)
      process.on(signal, () => child.kill(signal))
    child.on('error', reject)
    child.on('exit', (code) => resolve(code ?? 1))
  })
}
