import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { countPlaywright, countVitest, sum } from '@/lib/commands/test-reports'

let folder: string
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'evenlot-reports-'))
})
afterEach(() => rmSync(folder, { recursive: true, force: true }))

function report(content: unknown): string {
  const path = join(folder, 'report.json')
  writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content))
  return path
}

describe('the count of a stage', () => {
  it('is what the runner reported', () => {
    expect(countVitest(report({ numPassedTests: 7, numFailedTests: 0 }), 0)).toEqual({ passed: 7, failed: 0 })
    expect(countVitest(report({ numPassedTests: 7, numFailedTests: 2 }), 1)).toEqual({ passed: 7, failed: 2 })
  })

  it('fails a runner that ran no test', () => {
    expect(countVitest(report({ numPassedTests: 0, numFailedTests: 0 }), 0)).toEqual({ passed: 0, failed: 1 })
  })

  it('fails a runner that left no report, or half of one', () => {
    expect(countVitest(join(folder, 'missing.json'), 0)).toEqual({ passed: 0, failed: 1 })
    expect(countVitest(report('{"numPassed'), 0)).toEqual({ passed: 0, failed: 1 })
  })

  it('fails a runner that failed though each test it ran passed: a file did not load', () => {
    expect(countVitest(report({ numPassedTests: 7, numFailedTests: 0 }), 1)).toEqual({ passed: 7, failed: 1 })
  })

  it('counts a browser test that passed only at the second try as failed', () => {
    const stats = { expected: 3, unexpected: 1, flaky: 1, skipped: 2 }
    expect(countPlaywright(report({ stats }), 1)).toEqual({ passed: 3, failed: 2 })
  })

  it('adds up over the stages', () => {
    const counts = [
      { passed: 1, failed: 0 },
      { passed: 41, failed: 2 },
    ]
    expect(sum(counts)).toEqual({ passed: 42, failed: 2 })
  })
})
