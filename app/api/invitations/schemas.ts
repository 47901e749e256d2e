import { z } from 'zod'

const shownTime = z.object({ text: z.string(), zoneText: z.string(), iso: z.iso.datetime() })

/** Reading what stands behind an invitation link: no laboratory, no address, no code, no value. */
export const schemas = {
  read: z.object({ token: z.string().max(300) }),
  invitation: z.union([
    z.object({ state: z.literal('unknown') }),
    z.object({
      state: z.enum(['open', 'accepted', 'declined', 'superseded', 'closed']),
      study: z.object({
        shortName: z.string(),
        title: z.string(),
        method: z.string(),
        purpose: z.string(),
        organisation: z.string(),
      }),
      deadline: shownTime,
      asked: z.object({ measurands: z.array(z.string()), materials: z.int(), results: z.int() }),
    }),
  ]),
}
