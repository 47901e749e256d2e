import { z } from 'zod'

const instant = z.iso.datetime({ offset: true })

const laneAnswer = z.object({
  code: z.string(),
  state: z.enum(['returned', 'in draft', 'not begun', 'late']),
  acceptedAt: instant.nullable(),
  draftSavedAt: instant.nullable(),
  draftEntries: z.number().int(),
  returnedAt: instant.nullable(),
  /** How many times the laboratory has returned; the last one counts. */
  returns: z.number().int(),
  results: z.number().int(),
  extendedTo: instant.nullable(),
  asksForTime: z.boolean(),
})

/** How far a study's returns have come, by code alone. */
export const returnsAnswer = z.object({
  now: instant,
  dueAt: instant,
  zone: z.string(),
  places: z.number().int(),
  returned: z.number().int(),
  late: z.number().int(),
  lanes: z.array(laneAnswer),
})

export const studyParams = z.object({ studyId: z.uuid() })

export type LaneAnswer = z.infer<typeof laneAnswer>
export type ReturnsAnswer = z.infer<typeof returnsAnswer>
