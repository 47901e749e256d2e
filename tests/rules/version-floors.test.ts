import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import floors from './version-floors.json'

const lock = JSON.parse(readFileSync('package-lock.json', 'utf8')) as {
  packages: Record<string, { version?: string; resolved?: string }>
}

/** Every copy of a package that the lock file installs, however deep. */
function versionsOf(name: string): string[] {
  return Object.entries(lock.packages)
    .filter(([path]) => path === `node_modules/${name}` || path.endsWith(`/node_modules/${name}`))
    .map(([, { version }]) => version!)
}

/** Negative when the first is the older; by the rules of semantic versions, prereleases before their release. */
function compareVersions(first: string, second: string): number {
  const parse = (version: string) => {
    const [release, prerelease] = version.split(/-(.*)/)
    return { release: release!.split('.').map(Number), prerelease: prerelease ? prerelease.split('.') : [] }
  }
  const [a, b] = [parse(first), parse(second)]
  for (const index of [0, 1, 2]) {
    const difference = a.release[index]! - b.release[index]!
    if (difference !== 0) return difference
  }
  if (a.prerelease.length === 0 || b.prerelease.length === 0) return b.prerelease.length - a.prerelease.length
  for (let index = 0; index < Math.max(a.prerelease.length, b.prerelease.length); index += 1) {
    const [left, right] = [a.prerelease[index], b.prerelease[index]]
    if (left === right) continue
    if (left === undefined || right === undefined) return left === undefined ? -1 : 1
    const [leftNumber, rightNumber] = [Number(left), Number(right)]
    if (!Number.isNaN(leftNumber) && !Number.isNaN(rightNumber)) return leftNumber - rightNumber
    return left < right ? -1 : 1
  }
  return 0
}

describe('the lock file', () => {
  it.each(floors.floors)(
    'installs no $package older than $floor ($advisories)',
    ({ package: name, floor }) => {
      const versions = versionsOf(name)
      expect(versions).not.toEqual([])
      expect(versions.filter((version) => compareVersions(version, floor) < 0)).toEqual([])
    },
  )

  it('installs one nodemailer: a second, older copy would send mail past the floor', () => {
    expect(versionsOf('nodemailer')).toHaveLength(1)
  })

  it('names no registry, so that it installs from whichever one the machine uses', () => {
    const naming = Object.entries(lock.packages).filter(([, { resolved }]) => resolved !== undefined)
    expect(naming.map(([path]) => path)).toEqual([])
  })
})

describe('the comparison of versions', () => {
  it.each([
    ['16.3.2', '16.3.3'],
    ['9.1.1', '10.0.0'],
    ['5.0.0-beta.4', '5.0.0-beta.32'],
    ['5.0.0-beta.32', '5.0.0'],
    ['5.0.0-alpha.9', '5.0.0-beta.1'],
    ['5.0.0-beta', '5.0.0-beta.1'],
  ])('puts %s before %s', (older, newer) => {
    expect(compareVersions(older, newer)).toBeLessThan(0)
    expect(compareVersions(newer, older)).toBeGreaterThan(0)
    expect(compareVersions(newer, newer)).toBe(0)
  })
})
