import { z } from 'zod'

/** An entry as it is hashed, so that whoever holds the file can verify the chain without this service. */
const trailEntryAnswer = z.object({
  studyId: z.uuid(),
  sequence: z.number().int(),
  at: z.iso.datetime(),
  actorId: z.uuid().nullable(),
  actorRole: z.string(),
  action: z.string(),
  version: z.number().int(),
  body: z.string(),
  previousHash: z.string(),
  hash: z.string(),
})

export const trailAnswer = z.object({
  studyId: z.uuid(),
  head: z.string().nullable(),
  verdict: z.object({ sequence: z.number().int(), reason: z.string() }).nullable(),
  entries: z.array(trailEntryAnswer),
})
