import { randomBytes } from 'node:crypto'
import { Children } from './children'
import { clusterUrl } from './cluster-access'
import { freePort } from './free-port'
import { preparePrivateDatabase, privateEnvironment } from './private-run'
import { ensureBuild } from './product-build'
import { startFakeMail, startProduct } from './product-processes'
import { countPlaywright, type Count } from './test-reports'
import type { TestRun } from './test-run'

const DATABASE = 'browser'

/** Runs the browser tests against the built product, in a world of its own that ends with them. */
export async function runBrowserTests(run: TestRun): Promise<Count> {
  const { root, folder, say } = run
  await ensureBuild(root, say)
  const { access } = await run.openCluster()
  const ports = {
    web: await freePort(),
    mailRelay: await freePort(),
    mailbox: await freePort(),
    mailboxWeb: await freePort(),
  }
  const world = { access, ports, secret: randomBytes(48).toString('base64'), database: DATABASE }
  await preparePrivateDatabase(world, say)

  const children = new Children(`${folder}/log`)
  run.onClose(() => children.stopAll())
  await startFakeMail({ root, children, folder: `${folder}/mail`, ports })
  const env = privateEnvironment(world)
  await startProduct({ root, children, env, port: ports.web })

  const report = `${folder}/browser.json`
  const tests = run.tool('@playwright/test/cli.js', ['test'], {
    ...env,
    DATABASE_OWNER_URL: clusterUrl(access, 'owner', DATABASE),
    MAILBOX_URL: `http://127.0.0.1:${ports.mailboxWeb}`,
    REFUSED_ADDRESSES_FILE: `${folder}/mail/refused.json`,
    TEST_CLUSTER: JSON.stringify(access),
    TEST_REPORT: report,
  })
  // A worker that died would show as mail that never comes; its own words say more.
  void children.unexpectedEnd.then(({ name, outcome, tail }) => {
    say(`The ${name} ended by itself (${outcome}). Its last words:\n${tail.join('\n')}`)
  })
  const count = countPlaywright(report, await tests)
  await children.stopAll()
  return count
}
