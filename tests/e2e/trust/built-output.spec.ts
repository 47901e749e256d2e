import { readdirSync, readFileSync } from 'node:fs'
import { expect, test } from '@playwright/test'
import { laboratories, people } from '@/db/seed/twine-people'
import type { ClusterAccess } from '@/lib/commands/cluster-access'
import { listActions } from './support/actions'
import { foundCommittee, openAttackWorld, stageStudy } from './support/attack-world'
import { fromOurPage, send } from './support/send'

/* what the build holds, and what an action can be made to say of itself. */

function filesUnder(folder: string): string[] {
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => `${entry.parentPath}/${entry.name}`)
}

const served = filesUnder('.next/static')
const chunks = filesUnder('.next/server').filter((path) => /\.(js|mjs|json|html|rsc|meta|body)$/.test(path))

function holding(files: readonly string[], words: readonly string[]): string[] {
  return files.flatMap((path) => {
    const text = readFileSync(path, 'utf8')
    return words.filter((word) => text.includes(word)).map((word) => `${path}: ${word.slice(0, 12)}…`)
  })
}

test('A-04: no built chunk holds a secret of the running product', () => {
  const access = JSON.parse(process.env.TEST_CLUSTER ?? '{}') as ClusterAccess
  const secrets = [process.env.AUTH_SECRET ?? '', ...Object.values(access.passwords)]
  expect(secrets.every((secret) => secret.length > 30)).toBe(true)
  expect(chunks.length).toBeGreaterThan(50)
  expect(holding([...served, ...chunks], secrets)).toEqual([])
})

test('A-04: no built chunk holds a person, a laboratory or an address of the demonstration', () => {
  const identities = [
    ...Object.values(people).flatMap(({ name, address }) => [name, address]),
    ...laboratories.flatMap(({ laboratory, contactName, address }) => [laboratory, contactName, address]),
  ]
  expect(identities.length).toBeGreaterThan(40)
  expect(holding([...served, ...chunks], identities)).toEqual([])
})

test('A-04: what browsers are given holds no SQL, no table of the vault and no map back to the sources', () => {
  expect(served.filter((path) => path.endsWith('.map'))).toEqual([])
  const scripts = served.filter((path) => path.endsWith('.js'))
  expect(scripts.length).toBeGreaterThan(10)
  const serverOnly = [
    'vault.',
    'insertInto',
    'selectFrom',
    'DATABASE_URL',
    'AUTH_SECRET',
    'SMTP_URL',
    'node:crypto',
    'sourceMappingURL',
  ]
  expect(holding(scripts, serverOnly)).toEqual([])
})

test('A-04: sources, maps and inner files are at no address', async () => {
  const asked = [
    '/_next/server/server-reference-manifest.json',
    '/_next/../.next/BUILD_ID',
    '/.next/BUILD_ID',
    '/_next/static/../server/server-reference-manifest.json',
    '/_next/static/%2e%2e/server/server-reference-manifest.json',
    '/_next/static/..%2fserver/server-reference-manifest.json',
    '/package.json',
    '/.env',
    '/.git/config',
    '/_next/image?url=%2Fmark.svg&w=64&q=75',
    '/_next/image?url=http%3A%2F%2F127.0.0.1%2F&w=64&q=75',
    ...served
      .filter((path) => path.endsWith('.js'))
      .slice(0, 5)
      .map((path) => `${path.replace('.next/', '/_next/')}.map`),
  ]
  for (const path of asked) {
    const { status, text } = await send({ path })
    expect([404, 308, 307, 400], path).toContain(status)
    expect(text).not.toContain('exportedName')
  }
})

test('A-04: an action handed another action as its input does not say its source', async () => {
  const world = openAttackWorld()
  try {
    const committee = await foundCommittee(world, { laboratories: 2 })
    const { studyId } = await stageStudy(world, committee, { stage: 'draft' })
    const cookie = await world.cookieOf(committee.coordinator)
    const boundary = 'a-boundary-of-the-tests'
    for (const { id, name, page } of listActions()) {
      // The second argument is a map in place of a form: whatever field is read from it is a function of the server.
      const fields = ['lines', 'studyId', 'link', 'step', 'address', 'reason', 'shortName']
      const parts: [string, string][] = [
        ['1', JSON.stringify({ id, bound: null })],
        ['2', JSON.stringify(fields.map((field) => [field, '$h1']))],
        ['0', '["$h1","$Q2"]'],
      ]
      const body = parts
        .map(
          ([field, value]) =>
            `--${boundary}\r\nContent-Disposition: form-data; name="${field}"\r\n\r\n${value}\r\n`,
        )
        .join('')
      const { status, text } = await send({
        method: 'POST',
        path: page.replace('[studyId]', studyId).replace('[uploadId]', studyId),
        cookie,
        headers: {
          ...fromOurPage,
          'next-action': id,
          'content-type': `multipart/form-data; boundary=${boundary}`,
        },
        body: `${body}--${boundary}--\r\n`,
      })
      expect(status, name).toBeGreaterThan(0)
      expect(text, name).not.toMatch(/=>\s*\{|async function|await\s|\breturn\s|requestContext|formAction\(/)
    }
    expect((await send({ path: '/api/health/live' })).status).toBe(200)
  } finally {
    await world.destroy()
  }
})
