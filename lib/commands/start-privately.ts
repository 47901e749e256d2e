import { Children } from './children'
import { dataFolder } from './cluster-place'
import { tryLock } from './file-lock'
import { keptPorts, keptSecret, readPorts, type Ports } from './kept-values'
import { openPrivateCluster } from './private-cluster'
import { preparePrivateDatabase, privateEnvironment } from './private-run'
import { ensureBuild } from './product-build'
import { startFakeMail, startProduct } from './product-processes'
import { nextStopSignal, runUntilStopped } from './run-until-stopped'
import { demonstrationPeople } from './seed-demonstration'

/** Runs the product by itself: a private database, a fake mail service and the demonstration world. */
export async function startPrivately(root: string): Promise<number> {
  const folder = dataFolder(root)
  const say = (line: string) => console.log(line)
  const release = await tryLock(`${folder}/run.lock`)
  if (!release) {
    console.error(`Evenlot already runs from this folder, at http://localhost:${readPorts(folder)?.web}.`)
    return 1
  }
  const stopRequested = nextStopSignal()
  const children = new Children(`${folder}/log`)
  const cluster = await openPrivateCluster({ root, say })
  try {
    const ports = await keptPorts(folder, Number(process.env.PORT) || undefined)
    const run = { access: cluster.access, ports, secret: keptSecret(folder) }
    await preparePrivateDatabase(run, say)
    await ensureBuild(root, say)
    await startFakeMail({ root, children, folder: `${folder}/mail`, ports })
    await startProduct({ root, children, env: privateEnvironment(run), port: ports.web })
    welcome(ports, await demonstrationPeople()).forEach(say)
    return await runUntilStopped(children, stopRequested)
  } finally {
    await children.stopAll()
    await cluster.stop()
    await release()
  }
}

function welcome(
  ports: Ports,
  everybody: readonly { name: string; address: string; role: string }[],
): string[] {
  const width = Math.max(...everybody.map(({ address }) => address.length))
  const people = everybody.map(({ name, address, role }) => `  ${address.padEnd(width)}  ${name}, ${role}`)
  return [
    '',
    `Evenlot            http://localhost:${ports.web}`,
    `Everybody's mail   http://localhost:${ports.mailboxWeb}`,
    '',
    'Sign in as one of these; the link comes by mail:',
    ...people,
    '',
    'Ctrl-C stops everything.',
  ]
}
