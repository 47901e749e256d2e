import { describe, expect, it } from 'vitest'
import { Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'

// What a mail server, a parser or an eye could take for another address, or for more than one.
const refused = [
  '',
  ' ',
  'ada',
  'ada@',
  '@quill.example',
  'ada@quill',
  'ada@@quill.example',
  'ada@quill@evil.example',
  'ada＠quill.example',
  'ada﹫quill.example',
  'ada@quill．example',
  'ａda@quill.example',
  'ada@ｑuill.example',
  'ada@quill.example,eve@evil.example',
  'ada@quill.example;eve@evil.example',
  'ada@quill.example, eve@evil.example',
  'ada@quill.example eve@evil.example',
  'ada,eve@quill.example',
  'ada@quill.example,evil.example',
  '"ada"@quill.example',
  '"ada@evil.example"@quill.example',
  '"ada eve"@quill.example',
  'ada"@quill.example',
  '"><script>alert(1)</script>"@quill.example',
  'Ada <ada@quill.example>',
  '<ada@quill.example>',
  'ada@quill.example>',
  '<eve@evil.example> ada@quill.example',
  'ada(comment)@quill.example',
  '(comment)ada@quill.example',
  'ada@(comment)quill.example',
  'ada@quill.example(eve@evil.example)',
  'ada@quill.example.',
  'ada@.quill.example',
  'ada@quill..example',
  '.ada@quill.example',
  'ada.@quill.example',
  'ada..quill@quill.example',
  'ada@-quill.example',
  'ada@quill-.example',
  'ada@[192.0.2.1]',
  'ada@192.0.2.1',
  'ada@quill.example\r\nBcc: eve@evil.example',
  'ada@quill.example\nRCPT TO:<eve@evil.example>',
  'ada\r\n@quill.example',
  'ada\u0000@quill.example',
  'ada\t@quill.example',
  'a da@quill.example',
  'ada\u00a0@quill.example',
  'ada\u200b@quill.example',
  'ada@quill。example',
  'ada@quill\u200b.example',
  '=?utf-8?q?ada?=@quill.example',
  '\u202eada@quill.example',
  'ada%0d%0aBcc:eve@evil.example@quill.example',
  'ada:eve@evil.example@quill.example',
  'group:ada@quill.example;',
  'mailto:ada@quill.example?bcc=eve@evil.example',
  'ada\\@evil.example@quill.example',
  'adа@quill.example',
  'ada@quill.example\u2028eve@evil.example',
  'ada@quill.example\u0085Bcc:eve@evil.example',
  'ada@quill.example|eve',
  'ada@quill_lab.example',
  `${'a'.repeat(65)}@quill.example`,
  `ada@${'q'.repeat(64)}.example`,
  `ada@${'quill.'.repeat(50)}example`,
]

describe('a mail address', () => {
  it('has at least 60 deceptive forms to be held against', () => {
    expect(new Set(refused).size).toBeGreaterThanOrEqual(60)
  })

  it.each(refused)('is not %j', (typed) => {
    let outcome: unknown
    try {
      outcome = readMailAddress(typed)
    } catch (error) {
      outcome = error
    }
    expect(outcome).toBeInstanceOf(Refusal)
    expect((outcome as Refusal).code).toBe('bad-address')
  })

  it.each([
    ['ada@quill.example', 'ada@quill.example'],
    [' Ada.Quill@Quill.Example ', 'ada.quill@quill.example'],
    ['ada+studies@quill.example', 'ada+studies@quill.example'],
    ["o'ada@quill.example", "o'ada@quill.example"],
    ['ada@müller.example', 'ada@xn--mller-kva.example'],
    ['ada@lab.quill.example', 'ada@lab.quill.example'],
    // Marks that the rules for host names read as a full stop, or drop: what is kept, shown and mailed is the plain form.
  ])('%j is kept as %j', (typed, kept) => {
    expect(readMailAddress(typed)).toBe(kept)
    expect(readMailAddress(kept)).toBe(kept)
  })
})
