// The fake mail service as one process: npm start and the browser tests run it beside the product.
import { mkdirSync } from 'node:fs'
import { startMailRelay } from './mail-relay'
import { startMailbox } from './mailbox'

const [relayPort, smtpPort, webPort, folder] = process.argv.slice(2)
if (!relayPort || !smtpPort || !webPort || !folder) {
  console.error('Usage: mail.ts <relay port> <mailbox port> <web port> <folder>')
  process.exit(2)
}

mkdirSync(`${folder}/messages`, { recursive: true })
// The relay first: once the mailbox answers, all of the service does.
const relay = await startMailRelay({
  port: Number(relayPort),
  mailboxPort: Number(smtpPort),
  refusedFile: `${folder}/refused.json`,
})
const mailbox = await startMailbox({
  smtpPort: Number(smtpPort),
  webPort: Number(webPort),
  folder: `${folder}/messages`,
})

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    void Promise.allSettled([relay.close(), mailbox.close()]).then(() => process.exit(0))
  })
}
