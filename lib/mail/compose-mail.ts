import type { Kysely } from 'kysely'
import {
  unscopedFindExtensionMail,
  unscopedFindExtensionRequestMail,
  unscopedFindInvitationMail,
  unscopedFindReceiptMail,
  type MailRow,
} from '@/db/queries/mail'
import { unscopedFindSignInMail } from '@/db/queries/sign-in'
import type { DB } from '@/db/tables'
import type { LinkSecrets } from '@/lib/context'
import type { Letter } from './letter'
import {
  extensionGrantedLetter,
  extensionRequestedLetter,
  invitationLetter,
  receiptLetter,
  signInLetter,
} from './letters'
import { mailKinds, type MailIds, type MailKind } from './mail-kinds'

export interface ComposeParts {
  readonly db: Kysely<DB>
  readonly secrets: LinkSecrets
  readonly baseUrl: string
}

export interface ComposedMail {
  readonly letter: Letter
  /** Whom an answer reaches; null where the sender's own address serves. */
  readonly replyTo: string | null
}

type Composers = {
  [Kind in MailKind]: (parts: ComposeParts, ids: MailIds<Kind>) => Promise<ComposedMail | null>
}

/** The words of a mail as things stand now, or null when it is no longer wanted. */
export async function composeMail(parts: ComposeParts, mail: MailRow): Promise<ComposedMail | null> {
  if (!Object.hasOwn(mailKinds, mail.kind)) throw new Error(`no mail is of the kind “${mail.kind}”`)
  return compose(parts, mail.kind as MailKind, mail.subjectIds)
}

function compose<Kind extends MailKind>(parts: ComposeParts, kind: Kind, ids: unknown) {
  return composers[kind](parts, mailKinds[kind].parse(ids) as MailIds<Kind>)
}

const composers: Composers = {
  async 'sign-in'({ db, secrets, baseUrl }, { requestId }) {
    const request = await unscopedFindSignInMail(db, requestId)
    if (!request) return null
    const token = `${requestId}.${secrets.token('sign-in', requestId)}`
    // After "#", so that neither a server nor a proxy on the way ever logs it.
    const url = `${baseUrl}/sign-in/confirm#token=${token}&address=${encodeURIComponent(request.address)}`
    return { letter: signInLetter({ url, code: secrets.code(requestId) }), replyTo: null }
  },

  async invitation({ db, secrets, baseUrl }, { studyId, invitationId, link }) {
    const facts = await unscopedFindInvitationMail(db, { studyId, invitationId })
    if (!facts || facts.isAnswered || facts.latestLink !== Number(link)) return null
    const token = secrets.token('invitation', `${invitationId}.${link}`)
    const url = `${baseUrl}/invitation#${invitationId}.${link}.${token}`
    return { letter: invitationLetter({ ...facts, url }), replyTo: facts.coordinatorAddress }
  },

  async receipt({ db, baseUrl }, { studyId, returnId }) {
    const facts = await unscopedFindReceiptMail(db, { studyId, returnId })
    const url = `${baseUrl}/participations/${studyId}`
    return facts ? { letter: receiptLetter({ ...facts, url }), replyTo: facts.coordinatorAddress } : null
  },

  async 'extension-requested'({ db, baseUrl }, { studyId, requestId }) {
    const facts = await unscopedFindExtensionRequestMail(db, { studyId, requestId })
    const url = `${baseUrl}/studies/${studyId}/laboratories`
    return facts ? { letter: extensionRequestedLetter({ ...facts, url }), replyTo: null } : null
  },

  async 'extension-granted'({ db, baseUrl }, { studyId, participantId }) {
    const facts = await unscopedFindExtensionMail(db, { studyId, participantId })
    const url = `${baseUrl}/participations/${studyId}`
    return facts
      ? { letter: extensionGrantedLetter({ ...facts, url }), replyTo: facts.coordinatorAddress }
      : null
  },
}
