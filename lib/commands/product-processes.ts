import type { Children } from './children'

interface Product {
  root: string
  children: Children
  env: Record<string, string>
  port: number
}

/** The two processes of the product itself. Any number of each may run against one database. */
export async function startProduct({ root, children, env, port }: Product): Promise<void> {
  const shared = { NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1', ...env, PORT: String(port) }
  await children.start({
    name: 'worker',
    args: ['--import', 'tsx', 'lib/jobs/worker.ts'],
    env: shared,
    cwd: root,
  })
  await children.start({
    name: 'web',
    args: ['node_modules/next/dist/bin/next', 'start', '-H', '127.0.0.1', '-p', String(port)],
    env: shared,
    cwd: root,
    isReady: () => answers(`http://127.0.0.1:${port}/`),
  })
}

interface FakeMail {
  root: string
  children: Children
  folder: string
  ports: { mailRelay: number; mailbox: number; mailboxWeb: number }
}

/** The stand-in for the world's mail, for a run that has no outside services. */
export async function startFakeMail({ root, children, folder, ports }: FakeMail): Promise<void> {
  const addresses = [ports.mailRelay, ports.mailbox, ports.mailboxWeb].map(String)
  await children.start({
    name: 'mail',
    args: ['--import', 'tsx', 'fakes/mail.ts', ...addresses, folder],
    env: {},
    cwd: root,
    isReady: () => answers(`http://127.0.0.1:${ports.mailboxWeb}/api/healthz`),
  })
}

async function answers(url: string): Promise<boolean> {
  const reply = await fetch(url, { redirect: 'manual', signal: AbortSignal.timeout(5_000) })
  return reply.status < 500
}
