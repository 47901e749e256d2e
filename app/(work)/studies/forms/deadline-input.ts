import { z } from 'zod'

/** The fields of a deadline as a form sends them; the use case says what is wrong with the moment itself. */
export const deadlineInput = {
  localTime: z.string().trim().min(1, 'Give a day and a time, such as 14 March 2027, 17:00.'),
  zone: z.string().trim().min(1, 'Choose a time zone.'),
  choice: z
    .enum(['earlier', 'later'])
    .optional()
    .or(z.literal('').transform(() => undefined)),
}
