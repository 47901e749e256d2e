import { spawn } from 'node:child_process'
import { once } from 'node:events'

/**
 * Holds an exclusive lock on a file until the returned function is called or this process dies.
 *
 * Node has no flock of its own, so a small child holds it: it lives exactly as long as the pipe
 * to it is open, which the system closes even after kill -9. Nothing else inherits the lock.
 */
export async function holdLock(path: string): Promise<() => Promise<void>> {
  const release = await take(path, [])
  if (!release) throw new Error(`The lock ${path} could not be taken.`)
  return release
}

/** The same without waiting: undefined when someone else holds the lock. */
export async function tryLock(path: string): Promise<(() => Promise<void>) | undefined> {
  return take(path, ['--nonblock'])
}

async function take(path: string, options: string[]): Promise<(() => Promise<void>) | undefined> {
  const holder = spawn(
    'flock',
    ['--exclusive', ...options, path, 'sh', '-c', 'echo held; exec cat >/dev/null'],
    {
      stdio: ['pipe', 'pipe', 'ignore'],
      // A group of its own: Ctrl-C in the terminal must not release the lock before we do.
      detached: true,
    },
  )
  const ended = once(holder, 'exit')
  const held = await Promise.race([once(holder.stdout, 'data').then(() => true), ended.then(() => false)])
  if (!held) return undefined
  return async () => {
    holder.stdin.end()
    await ended
  }
}
