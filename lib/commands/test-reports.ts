import { existsSync, readFileSync } from 'node:fs'

export interface Count {
  passed: number
  failed: number
}

/** One check that is not a test of a runner, such as the linter. */
export function oneCheck(succeeded: boolean): Count {
  return succeeded ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 }
}

/** What vitest counted. Its exit code weighs in: a file that does not load fails without a failed test. */
export function countVitest(path: string, exitCode: number): Count {
  const report = read<{ numPassedTests: number; numFailedTests: number }>(path)
  return honest({ passed: report?.numPassedTests ?? 0, failed: report?.numFailedTests ?? 0 }, exitCode)
}

export function countPlaywright(path: string, exitCode: number): Count {
  const report = read<{ stats: { expected: number; unexpected: number; flaky: number } }>(path)
  const { expected = 0, unexpected = 0, flaky = 0 } = report?.stats ?? {}
  return honest({ passed: expected, failed: unexpected + flaky }, exitCode)
}

export function sum(counts: Count[]): Count {
  return {
    passed: counts.reduce((total, { passed }) => total + passed, 0),
    failed: counts.reduce((total, { failed }) => total + failed, 0),
  }
}

/** A runner that failed without a failed test, or ran none at all, has not shown anything. */
function honest({ passed, failed }: Count, exitCode: number): Count {
  const showedNothing = passed + failed === 0 || (exitCode !== 0 && failed === 0)
  return { passed, failed: showedNothing ? 1 : failed }
}

function read<T>(path: string): T | undefined {
  if (!existsSync(path)) return undefined
  try {
    return JSON.parse(readFileSync(path, 'utf8')) as T
  } catch {
    return undefined
  }
}
