import { ensureDebianPackages } from './debian-packages'
import { spawnSync } from 'node:child_process'

/*
 * What is measured and not tested: the speed of the numerical core beside R, and the coverage of its intervals in full.
 *
 *   npm run bench                 the speed
 *   npm run bench -- coverage     the coverage; writes its table anew (a quarter of an hour)
 *   npm run bench -- all          both
 */
const RUNS: Readonly<Record<string, readonly string[]>> = {
  speed: ['tests/bench/speed.ts'],
  coverage: ['tests/bench/coverage.ts'],
  all: ['tests/bench/speed.ts', 'tests/bench/coverage.ts'],
}

const [asked = 'speed'] = process.argv.slice(2)
const chosen = RUNS[asked]
if (chosen === undefined) {
  console.error(`There is no benchmark ${asked}. There are: ${Object.keys(RUNS).join(', ')}.`)
  process.exit(2)
}
await ensureDebianPackages(['r-base-core', 'r-cran-lme4'], (line) => console.log(line))
for (const script of chosen) {
  const { status } = spawnSync(process.execPath, ['--import', 'tsx', script], { stdio: 'inherit' })
  if (status !== 0) process.exit(status ?? 1)
}
