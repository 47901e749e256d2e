import { ensureBuild } from './product-build'
import { runBrowserTests } from './test-browser'
import { countVitest, oneCheck, type Count } from './test-reports'
import type { TestRun } from './test-run'

export interface Stage {
  name: string
  /** Debian packages that this stage cannot do without. */
  packages?: string[]
  run(run: TestRun): Promise<Count>
}

/** Everything that is checked, quickest to fail first. */
export const stages: readonly Stage[] = [
  { name: 'lint', run: (run) => check(run, 'eslint/bin/eslint.js', ['.', '--max-warnings', '0']) },
  {
    name: 'format',
    run: (run) => check(run, 'prettier/bin/prettier.cjs', ['--check', '--log-level', 'warn', '.']),
  },
  { name: 'types', run: checkTypes },
  { name: 'rules', run: checkImports },
  { name: 'unused', run: (run) => check(run, 'knip/bin/knip.js', ['--no-progress']) },
  { name: 'unit', run: (run) => vitest(run, 'unit') },
  {
    name: 'outside',
    packages: ['r-base-core', 'r-cran-lme4', 'r-cran-mass', 'python3-mpmath'],
    run: (run) => vitest(run, 'outside'),
  },
  { name: 'database', packages: ['postgresql'], run: (run) => vitest(run, 'database') },
  { name: 'build', run: checkBuild },
  { name: 'browser', packages: ['postgresql', 'chromium'], run: runBrowserTests },
]

async function check(run: TestRun, script: string, args: string[]): Promise<Count> {
  return oneCheck((await run.tool(script, args)) === 0)
}

async function checkTypes(run: TestRun): Promise<Count> {
  // The types of routes are generated; without them tsc would judge last week's routes.
  const generated = await run.tool('next/dist/bin/next', ['typegen'])
  return oneCheck(generated === 0 && (await run.tool('typescript/bin/tsc', ['--noEmit'])) === 0)
}

function checkImports(run: TestRun): Promise<Count> {
  const folders = ['app', 'db', 'fakes', 'lib', 'migrations', 'tests']
  return check(run, 'dependency-cruiser/bin/dependency-cruise.mjs', [
    '--config',
    '.dependency-cruiser.mjs',
    ...folders,
  ])
}

async function vitest(run: TestRun, project: string): Promise<Count> {
  const report = `${run.folder}/${project}.json`
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
  const env: Record<string, string> = project === 'database' ? { TEST_CLUSTER: await clusterAccess(run) } : {}
  const code = await run.tool('vitest/vitest.mjs', ['run', '--project', project, ...reporters], env)
  return countVitest(report, code)
}

async function clusterAccess(run: TestRun): Promise<string> {
  return JSON.stringify((await run.openCluster()).access)
}

async function checkBuild({ root, say }: TestRun): Promise<Count> {
  const { log } = await ensureBuild(root, say)
  // On a fresh machine there is no cache of an earlier build, and nothing is wrong with that.
  const warnings = log
    .split('\n')
    .filter((line) => /⚠|\bwarn(ing)?\b/i.test(line) && !line.includes('No build cache found'))
  if (warnings.length > 0) say(`The build warned:\n${warnings.join('\n')}`)
  return oneCheck(warnings.length === 0)
}
