import { readdirSync, readFileSync } from 'node:fs'

/** Seconds of processor time by part, from one call to the next. */
export type Use = Readonly<Record<string, number>>

interface Parts {
  /** By the name that is printed: a process and all it started. The generator itself is added. */
  readonly roots: Readonly<Record<string, number>>
}

/**
 * Who used the processors from this call to the next, as shares of one core. What no part of the run used was another
 * program's: on a machine that does other work too, a target may be missed for that alone.
 */
export function watchUse({ roots }: Parts): () => Use {
  const read = () => ({
    atMs: performance.now(),
    busy: busySeconds(),
    parts: Object.entries(roots).map(([name, pid]) => [name, treeSeconds(pid)] as const),
    generator: ownSeconds(process.pid),
  })
  const before = read()
  return () => {
    const after = read()
    const seconds = (after.atMs - before.atMs) / 1000
    const parts: [string, number][] = [
      ...after.parts.map(([name, used], index): [string, number] => [
        name,
        used - (before.parts[index]?.[1] ?? 0),
      ]),
      ['generator', after.generator - before.generator],
    ]
    const ours = parts.reduce((sum, [, used]) => sum + used, 0)
    parts.push(['other programs', Math.max(0, after.busy - before.busy - ours)])
    return Object.fromEntries(parts.map(([name, used]) => [name, used / seconds]))
  }
}

/** What a process and all it started hold in memory, in bytes. */
export function memoryOf(pid: number): number {
  const own = /^VmRSS:\s+(\d+) kB$/m.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1]
  return childrenOf(pid).reduce((sum, child) => sum + memoryOf(child), Number(own ?? 0) * 1024)
}

export function childrenOf(pid: number): number[] {
  return readdirSync(`/proc/${pid}/task`).flatMap((thread) =>
    readFileSync(`/proc/${pid}/task/${thread}/children`, 'utf8').split(' ').filter(Boolean).map(Number),
  )
}

export function commandOf(pid: number): string {
  return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ')
}

export function parentOf(pid: number): number {
  return Number(statFields(pid)[1])
}

function treeSeconds(pid: number): number {
  try {
    const [, , , , , , , , , , , , , ended = 0, endedInSystem = 0] = statFields(pid).map(Number)
    const gone = (ended + endedInSystem) / ticksASecond
    return ownSeconds(pid) + gone + childrenOf(pid).reduce((sum, child) => sum + treeSeconds(child), 0)
  } catch {
    // It ended between being listed and being looked at; its parent counts it from now on.
    return 0
  }
}

function ownSeconds(pid: number): number {
  const fields = statFields(pid)
  return (Number(fields[11]) + Number(fields[12])) / ticksASecond
}

/** Linux tells user space a hundred, whatever the kernel itself counts in. */
const ticksASecond = 100

/** From the state of the process on: the field before it is a name in brackets, which may hold blanks. */
function statFields(pid: number): string[] {
  return readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1)?.split(' ') ?? []
}

/** Of all cores together, by whomever. */
function busySeconds(): number {
  const [line = ''] = readFileSync('/proc/stat', 'utf8').split('\n')
  // User, nice, system, idle, waiting for a disk, interrupts, soft ones, stolen; guests are counted in the first two.
  const [user = 0, nice = 0, system = 0, , , hard = 0, soft = 0, stolen = 0] = line
    .split(/\s+/)
    .slice(1, 9)
    .map(Number)
  return (user + nice + system + hard + soft + stolen) / ticksASecond
}
