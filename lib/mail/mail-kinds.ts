import { z } from 'zod'

const id = z.uuid()
const number = z.string().regex(/^[1-9]\d*$/)

/** Every kind of mail, with the ids it needs. What the mail says is loaded when it is sent. */
export const mailKinds = {
  'sign-in': z.object({ requestId: id }),
  invitation: z.object({ studyId: id, invitationId: id, link: number }),
  receipt: z.object({ studyId: id, returnId: id, participantId: id }),
  'extension-requested': z.object({ studyId: id, requestId: id }),
  'extension-granted': z.object({ studyId: id, participantId: id }),
} as const

export type MailKind = keyof typeof mailKinds
export type MailIds<Kind extends MailKind> = z.output<(typeof mailKinds)[Kind]>
