import { describe, expect, it } from 'vitest'
import { Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'

describe('a mail address', () => {
  it.each([
    ['Ines@Laboratory.Example', 'ines@laboratory.example'],
    ['  a.b+c@x.example ', 'a.b+c@x.example'],
    ['post@münze.example', 'post@xn--mnze-0ra.example'],
    ["o'brien@x.example", "o'brien@x.example"],
  ])('“%s” is kept as %s', (typed, kept) => {
    expect(readMailAddress(typed)).toBe(kept)
  })

  it.each([
    'a@x.example, b@y.example',
    'a@x.example;b@y.example',
    'a@x.example b@y.example',
    'a@x.example\nBcc: b@y.example',
    'a@x.example\r\n\r\nhello',
    '"a b"@x.example',
    'Ines <a@x.example>',
    'a(comment)@x.example',
    'a@@x.example',
    'a@x.example@y.example',
    'a＠x.example',
    'ⓐ@x.example',
    'a@x',
    'a@[127.0.0.1]',
    'a@127.0.0.1',
    'a@-x.example',
    'a@x..example',
    '.a@x.example',
    'a.@x.example',
    'a..b@x.example',
    'a%x.example@y',
    'ä@x.example',
    'a@x.example\u0000',
    'a\u200b@x.example',
    '',
    '@x.example',
    `${'a'.repeat(65)}@x.example`,
    `a@${'x'.repeat(250)}.example`,
  ])('refuses %j and asks for one address', (typed) => {
    expect(() => readMailAddress(typed)).toThrow(Refusal)
    expect(() => readMailAddress(typed)).toThrow(/one mail address/)
  })

  it('names the field that was typed in', () => {
    expect(() => readMailAddress('nobody', 'contact')).toThrow(expect.objectContaining({ field: 'contact' }))
  })

  it('is the same however it is read again', () => {
    const once = readMailAddress('Post@MÜNZE.example')
    expect(readMailAddress(once)).toBe(once)
  })
})
