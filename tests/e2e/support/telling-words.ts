import type { DemonstrationLaboratory } from '@/db/seed/twine-people'

/** Every word that would tell which laboratory is meant: its name, town, contact, address and the address's parts. */
export function tellingWords({ laboratory, city, contactName, address }: DemonstrationLaboratory): string[] {
  const [localPart = '', domain = ''] = address.split('@')
  const surname = contactName.split(' ').at(-1) ?? ''
  return [laboratory, city, contactName, surname, address, localPart, domain].map((word) =>
    word.toLowerCase(),
  )
}

/** Which of the words stand in a text, however they are written there. */
export function wordsIn(text: string, words: readonly string[]): string[] {
  const plain = unescape(text).toLowerCase()
  // A word may be cut by markup, as where a part of it is a link.
  const withoutMarkup = plain.replace(/<!--.*?-->|<[^<>]*>/g, '')
  return words.filter((word) => plain.includes(word) || withoutMarkup.includes(word))
}

/**
 * A code stands as a word of its own; what looks like one within nonces, the path of a drawing, or the address of a
 * workbook's cell is none.
 */
export function codesIn(text: string, codes: readonly string[]): string[] {
  const words = text
    .replace(/nonce(-|="|\\?":\\?")[\w+/=]+/g, ' ')
    .replace(/\bd(="|\\?":\\?")[^"\\]*/g, ' ')
    .replace(/ (r|ref|sqref|activeCell|topLeftCell)="[^"]*"|<(f|formula\d?)>[^<]*/g, ' ')
    .replace(/\/_next\/static\/[\w\-./~]+/g, ' ')
  return codes.filter((code) => new RegExp(`(?<![\\w$])${code}(?!\\w)`).test(words))
}

function unescape(text: string): string {
  return text
    .replace(
      /\\u([0-9a-f]{4})|&#x([0-9a-f]+);|%([0-7][0-9a-f])/gi,
      (whole, json: string, entity: string, percent: string) => {
        const number = Number.parseInt(json ?? entity ?? percent, 16)
        return Number.isNaN(number) || number > 0xffff ? whole : String.fromCharCode(number)
      },
    )
    .replace(/&#(\d{1,5});/g, (_whole, number: string) => String.fromCharCode(Number(number)))
    .replace(/[\u00a0\u202f]|&nbsp;|(?<=\w)\+(?=\w)/g, ' ')
    .replaceAll('\u00ad', '')
}
