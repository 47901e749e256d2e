import type {
  ExtensionMailFacts,
  ExtensionRequestMailFacts,
  InvitationMailFacts,
  ReceiptMailFacts,
} from '@/db/queries/mail'
import { showTime } from '@/lib/domain/show-time'
import type { Letter } from './letter'

// No letter names a laboratory, a laboratory's code or a value: it says what waits, and where.

export function signInLetter({ url, code }: { url: string; code: string }): Letter {
  return {
    about: 'Evenlot',
    subject: 'your link to sign in',
    paragraphs: [
      'Someone, most likely you, asked to sign in here. Open the link below and press the button on its page.',
      `Or type this code on the page where you asked: ${code.slice(0, 4)} ${code.slice(4)}`,
    ],
    button: { label: 'Sign in', url },
    closing: [
      'Link and code serve once, within 10 minutes. If you did not ask, do nothing: without them nobody is signed in.',
    ],
  }
}

export function invitationLetter(facts: InvitationMailFacts & { url: string }): Letter {
  return {
    about: facts.shortName,
    subject: 'invitation to an interlaboratory study',
    paragraphs: [
      `Dear ${facts.contactName},`,
      `${facts.coordinatorName} of ${facts.organisationName} asks your laboratory to take part in the interlaboratory study “${facts.title}”.`,
      `Results are due by ${say(facts.dueAt, facts.zone)}. The link shows what is asked of you; there you accept or decline. Looking at it binds you to nothing.`,
    ],
    button: { label: 'See the invitation', url: facts.url },
    closing: [
      `The link answers for your laboratory, so pass it on only to whom you would let answer.`,
      howToStop(facts),
    ],
  }
}

export function receiptLetter(facts: ReceiptMailFacts & { url: string }): Letter {
  const count = `${facts.results} test result${facts.results === 1 ? '' : 's'}`
  return {
    about: facts.shortName,
    subject: 'your results were received',
    paragraphs: [
      `Your results for “${facts.title}” were received on ${say(facts.receivedAt, facts.zone)}: ${count}.`,
      `The receipt is ${facts.receiptNumber}. Sign in to see what was stored. If something in it is wrong, send a new return before the deadline: the latest one counts.`,
    ],
    button: { label: 'See your return', url: facts.url },
    closing: [howToStop(facts)],
  }
}

export function extensionRequestedLetter(facts: ExtensionRequestMailFacts & { url: string }): Letter {
  return {
    about: facts.shortName,
    subject: 'a laboratory asks for more time',
    paragraphs: [
      `In “${facts.title}” a laboratory asked for more time on ${say(facts.requestedAt, facts.zone)}. Which one, and why, is on the study's page; there you grant it or leave the deadline as it is.`,
    ],
    button: { label: 'See the request', url: facts.url },
    closing: [`You get this because you coordinate studies for ${facts.organisationName}.`],
  }
}

export function extensionGrantedLetter(facts: ExtensionMailFacts & { url: string }): Letter {
  return {
    about: facts.shortName,
    subject: 'you have more time',
    paragraphs: [
      `${facts.coordinatorName} of ${facts.organisationName} gave your laboratory more time in “${facts.title}”. Your results are now due by ${say(facts.dueAt, facts.zone)}.`,
    ],
    button: { label: 'See the study', url: facts.url },
    closing: [howToStop(facts)],
  }
}

function say(instant: Date, zone: string): string {
  const { text, zoneText } = showTime(instant, zone)
  return `${text}, ${zoneText}`
}

function howToStop({ coordinatorName }: { coordinatorName: string }): string {
  return `To hear no more of this study, or to ask something, answer this mail: it reaches ${coordinatorName}.`
}
