import { spawn, type ChildProcess } from 'node:child_process'
import { createWriteStream, mkdirSync } from 'node:fs'
import { once } from 'node:events'
import { setTimeout as pause } from 'node:timers/promises'

interface ChildOptions {
  name: string
  args: string[]
  env: Record<string, string>
  cwd: string
  /** Resolves to true once the child answers; asked again and again until then. */
  isReady?: () => Promise<boolean>
}

interface Running {
  name: string
  process: ChildProcess
  tail: string[]
}

/** Which child ended though nobody asked it to, and what it said last. */
export interface UnexpectedEnd {
  name: string
  outcome: string
  tail: string[]
}

const TAIL_LINES = 40
const READY_WITHIN_MS = 60_000
// Longer than the worker allows the jobs under way.
const STOP_WITHIN_MS = 30_000

/** The Node.js processes of one run: started in order, stopped in the reverse order, missed when one dies. */
export class Children {
  private readonly running: Running[] = []
  private stopping = false
  private reportEnd: (end: UnexpectedEnd) => void = () => undefined
  /** Settles when a child ends by itself. */
  readonly unexpectedEnd = new Promise<UnexpectedEnd>((resolve) => (this.reportEnd = resolve))

  /** Logs go to files in the folder, or, where none is given, straight on to our own output. */
  constructor(private readonly logFolder?: string) {
    if (logFolder) mkdirSync(logFolder, { recursive: true })
  }

  async start(options: ChildOptions): Promise<void> {
    const child = this.launch(options)
    if (options.isReady) await this.untilReady(child, options.isReady)
  }

  async stopAll(): Promise<void> {
    this.stopping = true
    for (const child of this.running.splice(0).reverse()) await stop(child.process)
  }

  private launch({ name, args, env, cwd }: ChildOptions): Running {
    // The death signal ends the child even when we are killed outright; the group of its own keeps
    // Ctrl-C in the terminal from reaching it before its turn.
    const child = spawn('setpriv', ['--pdeathsig', 'TERM', '--', process.execPath, ...args], {
      cwd,
      env: inherited(env),
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    const running: Running = { name, process: child, tail: [] }
    this.running.push(running)
    const log = this.logFolder ? createWriteStream(`${this.logFolder}/${name}.log`) : process.stdout
    const keep = (chunk: Buffer) => {
      log.write(chunk)
      running.tail.push(...chunk.toString().split('\n').filter(Boolean))
      running.tail.splice(0, running.tail.length - TAIL_LINES)
    }
    child.stdout.on('data', keep)
    child.stderr.on('data', keep)
    child.on('error', (failure) => running.tail.push(failure.message))
    child.on('close', (code, signal) => {
      if (!this.stopping) this.reportEnd({ name, outcome: signal ?? `code ${code}`, tail: running.tail })
    })
    return running
  }

  private async untilReady(child: Running, isReady: () => Promise<boolean>): Promise<void> {
    const deadline = Date.now() + READY_WITHIN_MS
    while (!(await isReady().catch(() => false))) {
      const { exitCode, signalCode } = child.process
      const ended = exitCode !== null || signalCode !== null
      if (ended || Date.now() > deadline) {
        const how = ended ? 'ended before it answered' : `did not answer within ${READY_WITHIN_MS / 1000} s`
        throw new Error(`The ${child.name} ${how}. Its last words:\n${child.tail.join('\n')}`)
      }
      await pause(100)
    }
  }
}

/** Of our own environment only what any program needs: a login meant for one child stays out of the others. */
function inherited(env: Record<string, string>): NodeJS.ProcessEnv {
  const needed = ['PATH', 'HOME', 'LANG', 'LC_ALL', 'TZ', 'TMPDIR', 'NODE_OPTIONS', 'NODE_EXTRA_CA_CERTS']
  const kept = needed.flatMap((name) => (process.env[name] === undefined ? [] : [[name, process.env[name]]]))
  return { ...Object.fromEntries(kept), ...env } as NodeJS.ProcessEnv
}

async function stop(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const ended = once(child, 'exit')
  child.kill('SIGTERM')
  const inTime = await Promise.race([ended.then(() => true), pause(STOP_WITHIN_MS, false, { ref: false })])
  if (inTime) return
  child.kill('SIGKILL')
  await ended
}
