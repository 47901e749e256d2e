import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'

const BINARY = /\.(woff2?|png|jpe?g|ico|xlsx|zip|pdf)$/

// A folder of one machine, by its usual places at the start of a path; /var/tmp and /etc are Debian's own.
const MACHINE_PATH = /(?<![\w.@/~-])\/(work|root|home|Users|mnt|workspace|opt)\/[\w.-]+/

const REGISTRY =
  /registry\.(npmjs|yarnpkg)\.|\bnpm\.pkg\.github\.|\bjsr\.io\b|https?:\/\/[\w.:-]*(artifactory|nexus|verdaccio)/i

// What .gitignore names, which is made on each machine.
const MADE_HERE = ['.data', '.git', '.next', 'node_modules', 'playwright-report', 'test-results']

/** Every text of the checkout. Walked, not asked of git: a machine that runs the tests need not have it. */
function textFiles(folder = '.'): string[] {
  return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const path = folder === '.' ? entry.name : `${folder}/${entry.name}`
    if (entry.isDirectory()) return MADE_HERE.includes(path) ? [] : textFiles(path)
    return BINARY.test(path) || /^next-env|tsbuildinfo$/.test(path) ? [] : [path]
  })
}

// This file must spell out what it looks for.
const texts = textFiles()
  .filter((path) => path !== 'tests/rules/files.test.ts')
  .map((path) => ({ path, text: readFileSync(path, 'utf8') }))

function pathsMatching(pattern: RegExp): string[] {
  return texts.filter(({ text }) => pattern.test(text)).map(({ path }) => path)
}

describe('the files of this checkout', () => {
  it('name no folder of one machine', () => {
    expect(pathsMatching(MACHINE_PATH)).toEqual([])
  })

  it('name no package registry', () => {
    expect(pathsMatching(REGISTRY)).toEqual([])
  })

  it('name nothing outside the checkout', () => {
    expect(pathsMatching(/\.\.\/shared\b/)).toEqual([])
  })
})

describe('the search', () => {
  it.each(['see /home/ada/evenlot', 'cd /root/project', "open('/opt/checkout/x')"])('finds %s', (text) => {
    expect(text).toMatch(MACHINE_PATH)
  })

  it.each(['app/(work)/studies', '@/lib/work/x', 'https://evenlot.example/home/page', '/var/tmp/evenlot-1'])(
    'leaves %s alone',
    (text) => {
      expect(text).not.toMatch(MACHINE_PATH)
    },
  )

  it('finds a registry in a lock file', () => {
    expect('"resolved": "https://registry.npmjs.org/x/-/x-1.0.0.tgz"').toMatch(REGISTRY)
  })
})
