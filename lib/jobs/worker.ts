import { logEvent } from '@/lib/log'
import { createMailTransport } from '@/lib/mail/transport'
import { closeParts, parts, systemContext } from '@/lib/wiring'
import { startWorker } from './start-worker'

const { config } = parts()
const mail = createMailTransport(config)
const worker = await startWorker({ ...systemContext(), mail, baseUrl: config.baseUrl })

let stopping = false
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => {
    if (stopping) return
    stopping = true
    void stop()
  })
}

async function stop(): Promise<void> {
  logEvent('worker stopping')
  await worker.stop()
  mail.close()
  await closeParts()
}
