import { createHash } from 'node:crypto'
import { chmodSync, lstatSync, mkdirSync, realpathSync } from 'node:fs'
import { programSucceeds, type Account } from './run-program'

/** The project's own folder for what a run leaves behind. Others may pass through it, not look inside. */
export function dataFolder(root: string): string {
  return ownFolder(`${realpathSync(root)}/.data`)
}

/**
 * Where clusters live: in the checkout, or, when the account that PostgreSQL runs as cannot enter
 * the checkout, under /var/tmp by a name made from the checkout's path.
 */
export async function clusterFolder(root: string, account: Account | undefined): Promise<string> {
  const data = dataFolder(root)
  if (!account || (await programSucceeds('test', ['-x', data], { account }))) return data
  const key = createHash('sha256').update(realpathSync(root)).digest('hex').slice(0, 12)
  return ownFolder(`/var/tmp/evenlot-${key}`)
}

function ownFolder(path: string): string {
  mkdirSync(path, { recursive: true, mode: 0o711 })
  const found = lstatSync(path)
  // /var/tmp is open to all: a folder or link that someone else put there first is not ours to use.
  if (!found.isDirectory() || found.uid !== process.getuid?.()) {
    throw new Error(`${path} exists but is not a folder of this account; remove it or start as its owner.`)
  }
  chmodSync(path, 0o711)
  return path
}
