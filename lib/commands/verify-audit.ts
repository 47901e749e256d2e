import { createDatabase } from '@/db/connection'
import { findChainHead, listAuditEntries, listChains } from '@/db/queries/audit'
import { findBreak } from '@/lib/domain/audit-entry'

/** Verifies every audit chain: a line each, exit status 1 when one is broken. */
async function verifyAudit(): Promise<number> {
  const url = process.env.DATABASE_URL
  if (!url) {
    console.error("DATABASE_URL is not set. Give the database's address with the login app.")
    return 2
  }
  const db = createDatabase(url, { applicationName: 'evenlot-verify-audit', max: 1 })
  try {
    let broken = 0
    for (const studyId of await listChains(db)) {
      const entries = await listAuditEntries(db, studyId)
      const verdict = findBreak(entries, await findChainHead(db, studyId))
      if (verdict) broken += 1
      console.log(
        `${studyId} ${verdict ? `broken at entry ${verdict.sequence}: ${verdict.reason}` : `whole, ${entries.length} entries, head ${entries.at(-1)?.hash}`}`,
      )
    }
    return broken > 0 ? 1 : 0
  } finally {
    await db.destroy()
  }
}

process.exitCode = await verifyAudit()
