import { describe, expect, it } from 'vitest'
import { layOutLetter, oneLine } from '@/lib/mail/letter'
import {
  extensionGrantedLetter,
  extensionRequestedLetter,
  invitationLetter,
  receiptLetter,
  signInLetter,
} from '@/lib/mail/letters'

const study = {
  shortName: 'Flour 27',
  title: 'Moisture in wheat flour',
  coordinatorName: 'Bea Ember',
  coordinatorAddress: 'bea@ember.example',
  organisationName: 'Ember Institute',
}
const url = 'http://localhost:3000/somewhere'
const dueAt = new Date('2027-03-14T17:00:00Z')
const zone = 'America/Sao_Paulo'

const letters = {
  'sign-in': signInLetter({ url, code: '12345678' }),
  invitation: invitationLetter({
    ...study,
    url,
    contactName: 'Ada Quill',
    zone,
    dueAt,
    isAnswered: false,
    latestLink: 1,
  }),
  receipt: receiptLetter({ ...study, url, receiptNumber: 'R-7H2K', receivedAt: dueAt, results: 24, zone }),
  'extension-requested': extensionRequestedLetter({ ...study, url, requestedAt: dueAt, zone }),
  'extension-granted': extensionGrantedLetter({ ...study, url, dueAt, zone }),
}

describe('every letter', () => {
  it.each(Object.entries(letters))(
    '%s: says the same in plain text and in HTML, with one button to one link',
    (_kind, letter) => {
      const { text, html } = layOutLetter(letter)
      for (const words of [...letter.paragraphs, ...letter.closing]) {
        expect(text).toContain(words)
        expect(unescaped(html)).toContain(words)
      }
      expect(text).toContain(url)
      expect(html.match(/<a /g)).toHaveLength(1)
      expect(html).toContain(`href="${url}"`)
    },
  )

  it.each(Object.entries(letters))('%s: loads nothing from outside', (_kind, letter) => {
    expect(layOutLetter(letter).html).not.toMatch(/<(img|link|script|iframe|style)|src=|url\(|@import/i)
  })

  it.each(Object.entries(letters).filter(([kind]) => kind !== 'sign-in'))(
    '%s: begins its subject with the study’s short name and says how to hear no more, or why it came',
    (_kind, letter) => {
      const { subject, text } = layOutLetter(letter)
      expect(subject).toMatch(/^Flour 27: /)
      expect(text).toMatch(/To hear no more of this study|You get this because/)
    },
  )
})

describe('the invitation', () => {
  it('says who asks, for what, and until when in the reader’s own zone', () => {
    const { text } = layOutLetter(letters.invitation)
    expect(text).toContain('Bea Ember of Ember Institute')
    expect(text).toContain('Moisture in wheat flour')
    // São Paulo has kept UTC−3 all year since 2019.
    expect(text).toContain('14 Mar 2027, 14:00, Sao Paulo (UTC−3)')
  })
})

describe('the receipt', () => {
  it('counts the results and tells none', () => {
    const { text } = layOutLetter(letters.receipt)
    expect(text).toContain('24 test results')
    expect(text).toContain('R-7H2K')
    expect(
      layOutLetter(receiptLetter({ ...study, url, receiptNumber: 'R', receivedAt: dueAt, results: 1, zone }))
        .text,
    ).toContain('1 test result.')
  })
})

describe('the link to sign in', () => {
  it('comes with a code that can be read aloud', () => {
    const { subject, text } = layOutLetter(letters['sign-in'])
    expect(subject).toBe('Evenlot: your link to sign in')
    expect(text).toContain('1234 5678')
  })
})

describe('what people typed into a study', () => {
  const nasty =
    'Flour\r\nBcc: eve@evil.example\r\nList-Unsubscribe: <https://evil.example>\r\n\r\n<b>Hello</b>\u202e\u2028'

  it('never makes a second line, of a subject or of anything else', () => {
    const { subject, text } = layOutLetter(
      invitationLetter({
        ...study,
        shortName: nasty,
        title: nasty,
        url,
        contactName: nasty,
        zone,
        dueAt,
        isAnswered: false,
        latestLink: 1,
      }),
    )
    expect(subject).not.toMatch(/[\r\n\u2028\u202e]/)
    expect(text.split('\n').filter((line) => /^(Bcc|List-)/i.test(line))).toEqual([])
  })

  it('never becomes markup', () => {
    const title = '<img src=x onerror=alert(1)>"\'&<script>'
    const { html } = layOutLetter(
      extensionGrantedLetter({ ...study, title, url: `${url}?a="><b>`, dueAt, zone }),
    )
    expect(html).not.toMatch(/<img|<script|"><b>/)
    expect(html).toContain('&lt;img src=x onerror=alert(1)&gt;&quot;&#39;&amp;&lt;script&gt;')
  })

  it('is one line with single spaces', () => {
    expect(oneLine(' a\t\r\n b\u0007\u0085c ')).toBe('a b c')
  })
})

function unescaped(html: string): string {
  return html
    .replaceAll('&#39;', "'")
    .replaceAll('&quot;', '"')
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&amp;', '&')
}
