import { domainToASCII } from 'node:url'
import { Refusal } from './errors'

/**
 * One mail address in the form in which it is stored and compared: NFKC, one "@", lower case, domain in ASCII.
 *
 * Anything that a mail server could read as a second recipient or another address is refused rather than
 * repaired: lists, quoted local parts, comments, control characters, look-alike "@" that appear only after
 * normalising.
 * @throws {Refusal} `bad-address`
 */
export function readMailAddress(typed: string, field = 'address'): string {
  const refuse = () =>
    new Refusal('bad-address', 'Give one mail address, such as name@laboratory.example.', field)
  if (typed.length > 254) throw refuse()
  const text = typed.trim()
  const address = text.normalize('NFKC')
  // A character that turns into something else only when normalised was typed to deceive, or by accident; ask.
  if (address !== text.normalize('NFC')) throw refuse()
  const match = /^([a-z0-9.!#$%&'*+/=?^_`{|}~-]{1,64})@([^@\s]{1,253})$/i.exec(address)
  if (!match?.[1] || !match[2]) throw refuse()
  // Dots of other scripts and joiners vanish when the domain is put into ASCII, and an encoded word is no name.
  if (!/^[\p{L}\p{M}\p{N}.-]+$/u.test(match[2]) || match[1].includes('=?')) throw refuse()
  const local = match[1].toLowerCase()
  const domain = domainToASCII(match[2].toLowerCase())
  if (local.startsWith('.') || local.endsWith('.') || local.includes('..')) throw refuse()
  if (!/^(?:[a-z0-9](?:[a-z0-9-]{0,61}[a-z0-9])?\.)+[a-z](?:[a-z0-9-]{0,61}[a-z0-9])$/.test(domain))
    throw refuse()
  return `${local}@${domain}`
}
