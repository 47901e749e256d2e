import { afterEach, beforeEach, expect, vi } from 'vitest'

const METHODS = ['debug', 'info', 'log', 'warn', 'error'] as const

let written: string[] = []

// A warning that scrolls by is a defect nobody reads; here it fails the test that caused it. A test
// that means to see output replaces the method itself, and this notices nothing.
beforeEach(() => {
  written = []
  for (const method of METHODS) {
    vi.spyOn(console, method).mockImplementation((...parts: unknown[]) => {
      written.push(`console.${method}: ${parts.map(String).join(' ')}`)
    })
  }
})

afterEach(() => {
  vi.restoreAllMocks()
  expect(written, 'what this test wrote to the console').toEqual([])
})
