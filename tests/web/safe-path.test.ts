import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { safePath } from '@/lib/web/safe-path'

const elsewhere = [
  '//evil.example',
  '///evil.example',
  '/\\evil.example',
  '\\\\evil.example',
  '/\\/evil.example',
  'https:evil.example',
  'https:/evil.example',
  'https://evil.example',
  'http:evil.example',
  'HTTPS://evil.example/studies',
  'javascript:alert(1)',
  'JaVaScRiPt:alert(1)',
  'data:text/html,hello',
  'evil.example',
  'evil.example/studies',
  '@evil.example',
  ':80',
  '',
  ' ',
  ' //evil.example',
  '\t//evil.example',
  '/\t/evil.example',
  '/\n/evil.example',
  '/\r/evil.example',
  '\u0000//evil.example',
  '/.//evil.example',
  '/./\\evil.example',
  '/studies/..//evil.example',
  '/studies/../..//evil.example',
  '/%2e//evil.example',
  '/%2f%2fevil.example',
  '/%2Fevil.example',
  '/%5cevil.example',
  '/%5C%5Cevil.example',
  '%2f%2fevil.example',
  '%2F%2Fevil.example',
  '/%252f%252fevil.example',
  '/%25252f%25252fevil.example',
  '/%2525252525252fevil.example',
  '/%09/evil.example',
  '/%0d%0aLocation:%20https://evil.example',
  '/%00/evil.example',
  '/%',
  '/%zz',
  '/sign-in?next=//evil.example',
  '/sign-in?next=%2F%2Fevil.example',
  '/sign-in/code?next=https://evil.example',
  '/SIGN-IN?next=//evil.example',
  '/sign-out',
  '/api/auth/callback/mailed-link?token=x',
  '/api/sign-in',
  '/_next/image?url=https://evil.example',
  '//evil.example/%2e%2e',
  '/' + 'a'.repeat(2001),
]

const here = [
  '/',
  '/studies',
  '/studies/new',
  '/studies/0b0c7a54-6f0d-4b53-9f54-0c8a2f7a7a10/plan',
  '/studies?sort=name&page=2',
  '/studies?back=https://evil.example',
  '/published/moisture-in-flour-2027',
  '/apiary',
]

describe('the page to go to after signing in', () => {
  it.each(elsewhere)('is the fallback for %j', (typed) => {
    expect(safePath(typed, '/fallback')).toBe('/fallback')
  })

  it.each(here)('is the page asked for: %j', (typed) => {
    expect(safePath(typed, '/fallback')).toBe(typed)
  })

  it.each([undefined, null, 7, ['/studies'], { toString: () => '//evil.example' }])(
    'is the fallback for what is no text',
    (typed) => {
      expect(safePath(typed, '/fallback')).toBe('/fallback')
    },
  )

  it('leaves out a fragment, which the server has no business with', () => {
    expect(safePath('/studies#token=1')).toBe('/studies')
  })

  it('never leaves the site, however it is put together', () => {
    const pieces = fc.constantFrom(
      '/',
      '\\',
      '.',
      '..',
      '%2f',
      '%5c',
      '%25',
      '@',
      ':',
      '\t',
      '\n',
      '?',
      '#',
      'evil.example',
      'https:',
    )
    fc.assert(
      fc.property(fc.array(pieces, { maxLength: 12 }), (parts) => {
        const path = safePath(parts.join(''))
        const url = new URL(path, 'https://site.example')
        expect(url.origin).toBe('https://site.example')
        expect(path).toMatch(/^\/(?![/\\])/)
      }),
      { seed: 20270301, numRuns: 5000 },
    )
  })
})
