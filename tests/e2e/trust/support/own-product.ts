import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { setTimeout as pause } from 'node:timers/promises'
import { migrateDatabase } from '@/db/commands/migrate-database'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'
import { freePort } from '@/lib/commands/free-port'
import { openAttackWorld, type AttackWorld } from './attack-world'

/** A web process that a test may kill, on a database that only it uses; no worker, so that nothing is mailed. */
export interface OwnProduct {
  readonly world: AttackWorld
  readonly base: string
  startWeb(manner?: Manner): Promise<WebProcess>
  close(): Promise<void>
}

interface Manner {
  readonly zone?: string
  /** How far the process's clock is off. */
  readonly offsetMs?: number
  /** A checkout whose build differs. */
  readonly folder?: string
}

export interface WebProcess {
  /** As a power cut or the kernel does it: at once, with nothing said. */
  kill(): Promise<void>
}

export async function openOwnProduct(name: string): Promise<OwnProduct> {
  const access = JSON.parse(process.env.TEST_CLUSTER ?? 'null') as ClusterAccess
  await asClusterAdmin(access, async (client) => {
    await client.query(`drop database if exists "${name}" with (force)`)
    await prepareDatabase(client, name)
  })
  const ownerUrl = clusterUrl(access, 'owner', name)
  await migrateDatabase(ownerUrl)
  const port = await freePort()
  const base = `http://localhost:${port}`
  const env = {
    DATABASE_URL: clusterUrl(access, 'app', name),
    DATABASE_READER_URL: clusterUrl(access, 'reader', name),
    BASE_URL: base,
    AUTH_SECRET: 'a secret for these tests alone, long enough',
    SMTP_URL: 'smtp://127.0.0.1:9',
    MAIL_FROM: 'Evenlot <studies@evenlot.example>',
    PORT: String(port),
  }
  const world = openAttackWorld({ ...env, DATABASE_OWNER_URL: ownerUrl })
  const running = new Set<WebProcess>()
  return {
    world,
    base,
    async startWeb(manner = {}) {
      const child = launch({ env, port, ...manner })
      const web: WebProcess = {
        kill: async () => {
          running.delete(web)
          if (child.exitCode !== null || child.signalCode !== null) return
          const ended = once(child, 'exit')
          process.kill(-(child.pid ?? 0), 'SIGKILL')
          await ended
        },
      }
      running.add(web)
      await untilAnswering(child, base)
      return web
    },
    async close() {
      for (const web of running) await web.kill()
      await world.destroy()
    },
  }
}

function launch({
  env,
  port,
  zone = 'UTC',
  offsetMs = 0,
  folder = process.cwd(),
}: Manner & { env: Record<string, string>; port: number }): ChildProcess {
  // Loaded before anything else, so that every part of the process goes by the wrong clock.
  const wrongClock = `data:text/javascript,${encodeURIComponent(shiftedDate(offsetMs))}`
  return spawn(
    process.execPath,
    [
      ...(offsetMs ? ['--import', wrongClock] : []),
      'node_modules/next/dist/bin/next',
      'start',
      '-H',
      '127.0.0.1',
      '-p',
      String(port),
    ],
    {
      cwd: folder,
      env: {
        NODE_ENV: 'production',
        NEXT_TELEMETRY_DISABLED: '1',
        PATH: process.env.PATH,
        HOME: process.env.HOME,
        TZ: zone,
        ...env,
      },
      stdio: 'ignore',
      // A group of its own, so that it dies with all it started.
      detached: true,
    },
  )
}

/** A stand-in for the clock that keeps everything else of the original: the framework copies its own properties. */
function shiftedDate(offsetMs: number): string {
  return `
    const now = () => Real.now() + (${offsetMs})
    const Real = Date
    globalThis.Date = new Proxy(Real, {
      construct: (target, given, asked) => Reflect.construct(target, given.length ? given : [now()], asked),
      apply: () => String(new Real(now())),
      get: (target, key) => (key === 'now' ? now : Reflect.get(target, key)),
    })`
}

async function untilAnswering(child: ChildProcess, base: string): Promise<void> {
  for (let tries = 0; tries < 600; tries += 1) {
    const answers = await fetch(`${base}/api/health/ready`, { signal: AbortSignal.timeout(5000) }).then(
      ({ ok }) => ok,
      () => false,
    )
    if (answers) return
    if (child.exitCode !== null || child.signalCode !== null)
      throw new Error('the web process ended before it answered')
    await pause(50)
  }
  throw new Error('the web process did not answer within half a minute')
}
