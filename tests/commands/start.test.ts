import { spawnSync } from 'node:child_process'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { expect, it } from 'vitest'

it('names every fault of half an environment, and starts nothing', () => {
  const start = spawnSync(process.execPath, ['--import', 'tsx', 'lib/commands/start.ts'], {
    encoding: 'utf8',
    env: { NODE_ENV: 'production', PATH: process.env.PATH, SMTP_URL: 'smtp://mail.example' },
  })
  expect(start.status).toBe(1)
  const named = [...start.stderr.matchAll(/^ {2}- (\w+) is not set/gm)].map(([, name]) => name)
  expect(named.sort()).toEqual([
    'AUTH_SECRET',
    'BASE_URL',
    'DATABASE_OWNER_URL',
    'DATABASE_READER_URL',
    'DATABASE_URL',
    'MAIL_FROM',
  ])
  expect(start.stdout).toBe('')
})

it('needs no package before it has installed them: the first lines import only what Node.js brings', () => {
  for (const file of ['start.mjs', 'test.mjs', 'install-packages.mjs']) {
    const imports = [...readFileSync(`lib/commands/${file}`, 'utf8').matchAll(/^import .* from '([^']+)'/gm)]
    expect(imports.map(([, from]) => from!).filter((from) => !/^(node:|\.\/)/.test(from))).toEqual([])
  }
})

it('has a file behind each script of package.json', () => {
  const { scripts } = JSON.parse(readFileSync('package.json', 'utf8')) as { scripts: Record<string, string> }
  const files = Object.values(scripts).flatMap(
    (script) => script.match(/\b(lib|db)\/commands\/[\w-]+\.m?[jt]s/g) ?? [],
  )
  expect(files.length).toBeGreaterThan(4)
  expect(files.filter((file) => !existsSync(file))).toEqual([])
  expect(readdirSync('.ci')).toContain('run')
})
