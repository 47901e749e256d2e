import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, lstatSync, readFileSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../..', import.meta.url))

/**
 * Installs exactly what package-lock.json names, when that is not what is installed. Runs before any
 * package is there, and so is plain JavaScript that needs none.
 */
export function installPackages() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major < 20 || (major === 20 && minor < 19)) {
    console.error(`Node.js 20.19 or later is needed; this is ${process.versions.node}.`)
    process.exit(1)
  }
  const stamp = `${root}node_modules/.evenlot-lock`
  const digest = createHash('sha256')
    .update(readFileSync(`${root}package-lock.json`))
    .digest('hex')
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === digest) return

  // npm ci empties the folder first, and would empty another checkout's through a link.
  if (lstatSync(`${root}node_modules`, { throwIfNoEntry: false })?.isSymbolicLink()) {
    console.error(
      'node_modules is a link to another folder and out of date. Remove the link and start again.',
    )
    process.exit(1)
  }
  console.log('Installing packages (npm ci)')
  // With NODE_ENV=production npm would leave out what the build itself needs.
  const install = spawnSync('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    stdio: 'inherit',
  })
  if (install.status !== 0) {
    console.error('npm ci failed; its own words are above.')
    process.exit(install.status ?? 1)
  }
  writeFileSync(stamp, digest)
}
