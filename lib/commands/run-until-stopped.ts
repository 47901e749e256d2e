import type { Children } from './children'

type Ending = { signal: NodeJS.Signals } | { died: string }

/** Waits until someone asks the run to end or a child ends by itself; gives back the exit code. */
export async function runUntilStopped(
  children: Children,
  stopRequested: Promise<NodeJS.Signals>,
): Promise<number> {
  const ending: Ending = await Promise.race([
    stopRequested.then((signal) => ({ signal })),
    children.unexpectedEnd.then(({ name, outcome, tail }) => ({
      died: `The ${name} ended by itself (${outcome}). Its last words:\n${tail.join('\n')}`,
    })),
  ])
  if ('signal' in ending) return 0
  console.error(ending.died)
  return 1
}

/** Settles at the first signal to stop. Listening on also keeps a second Ctrl-C from cutting the ending short. */
export function nextStopSignal(): Promise<NodeJS.Signals> {
  return new Promise((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
      process.on(signal, () => resolve(signal))
    }
  })
}
