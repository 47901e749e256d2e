import { describe, expect, it } from 'vitest'
import { answerRequest } from '@/lib/web/answer-request'
import { isForeignRequest } from '@/lib/web/foreign-request'
import { judgePageRequest } from '@/lib/web/judge-page-request'

const baseUrl = 'https://studies.example'

const foreign: [string, Record<string, string>][] = [
  ['a form of another site', { origin: 'https://evil.example', 'sec-fetch-site': 'cross-site' }],
  ['a form of another site in an old browser', { origin: 'https://evil.example' }],
  ['a form of another site that withholds its origin', { 'sec-fetch-site': 'cross-site' }],
  ['a sandboxed frame', { origin: 'null', 'sec-fetch-site': 'cross-site' }],
  ['a sandboxed frame in an old browser', { origin: 'null' }],
  ['a sibling host', { origin: 'https://other.studies.example', 'sec-fetch-site': 'same-site' }],
  ['a sibling host that withholds its origin', { 'sec-fetch-site': 'same-site' }],
  ['the same host without encryption', { origin: 'http://studies.example' }],
  ['the same host at another port', { origin: 'https://studies.example:8443' }],
  ['a host whose name begins with ours', { origin: 'https://studies.example.evil.example' }],
  ['nobody who says where from', {}],
  ['nobody who says where from, with a cookie and a token', { cookie: 'a=b', authorization: 'Bearer x' }],
  ['an address bar', { 'sec-fetch-site': 'none' }],
]

const ours: [string, Record<string, string>][] = [
  ['a page of ours', { origin: baseUrl, 'sec-fetch-site': 'same-origin' }],
  ['a page of ours in an old browser', { origin: baseUrl }],
  ['a page of ours whose browser sends no origin', { 'sec-fetch-site': 'same-origin' }],
  ['a program with a token and no cookie', { authorization: 'Bearer x' }],
]

describe('a request that may change something', () => {
  it.each(foreign)(
    'is refused from %s: in the proxy, and in the handler without it',
    async (_who, headers) => {
      for (const method of ['POST', 'PUT', 'PATCH', 'DELETE']) {
        const request = new Request(`${baseUrl}/studies`, { method, headers })
        expect(isForeignRequest(request, baseUrl)).toBe(true)
        expect(judge(request).status).toBe(403)
        const response = await answerRequest(request, {
          baseUrl,
          run: () => Promise.reject(new Error('ran')),
        })
        expect(response.status).toBe(403)
        expect(await response.json()).toMatchObject({ error: { code: 'foreign-request' } })
      }
    },
  )

  it.each(ours)('is let through from %s', async (_who, headers) => {
    const request = new Request(`${baseUrl}/studies`, { method: 'POST', headers })
    expect(judge(request).status).toBeNull()
    expect((await answerRequest(request, { baseUrl, run: async () => ({}) })).status).toBe(200)
  })

  it('is not what a link or a picture is: reading is open to all', () => {
    for (const method of ['GET', 'HEAD']) {
      const request = new Request(`${baseUrl}/studies`, {
        method,
        headers: { 'sec-fetch-site': 'cross-site' },
      })
      expect(judge(request).status).toBeNull()
    }
  })
})

describe('the proxy', () => {
  it('knows no picture service', () => {
    expect(judge(new Request(`${baseUrl}/_next/image?url=%2Fmark.svg&w=64&q=75`)).status).toBe(404)
  })

  it('gives the page its nonce and its address, whatever the client claimed them to be', () => {
    const headers = {
      'x-page-path': '//evil.example',
      'x-nonce': 'known',
      'content-security-policy': "script-src 'nonce-known'",
    }
    const { requestHeaders } = judge(new Request(`${baseUrl}/studies?sort=name`, { headers }))
    expect(requestHeaders.get('x-page-path')).toBe('/studies?sort=name')
    expect(requestHeaders.get('x-nonce')).toBe('drawn')
    expect(requestHeaders.get('content-security-policy')).toContain("'nonce-drawn'")
    expect(requestHeaders.get('content-security-policy')).not.toContain('known')
  })

  it('sets what every page must carry', () => {
    const { responseHeaders } = judge(new Request(`${baseUrl}/studies`))
    const policy = responseHeaders['Content-Security-Policy'] ?? ''
    for (const part of [
      "script-src 'nonce-drawn' 'strict-dynamic';",
      "object-src 'none'",
      "base-uri 'none'",
      "frame-ancestors 'none'",
      "form-action 'self'",
    ])
      expect(policy).toContain(part)
    expect(policy).not.toContain('unsafe-eval')
    expect(policy.replace("style-src-attr 'unsafe-inline'", '')).not.toContain('unsafe-inline')
    expect(responseHeaders).toMatchObject({
      'Cache-Control': 'private, no-store',
      'Cross-Origin-Opener-Policy': 'same-origin',
      'Cross-Origin-Resource-Policy': 'same-origin',
      'Referrer-Policy': 'same-origin',
      'X-Content-Type-Options': 'nosniff',
    })
    expect(responseHeaders['Strict-Transport-Security']).toMatch(/^max-age=\d{8}/)
    expect(responseHeaders['Permissions-Policy']).toContain('camera=()')
  })

  it('promises encryption only where there is some', () => {
    const local = judge(new Request('http://localhost:3000/'), 'http://localhost:3000')
    expect(local.responseHeaders).not.toHaveProperty('Strict-Transport-Security')
  })
})

function judge({ method, headers, url }: Request, base = baseUrl) {
  return judgePageRequest({ method, headers, url, baseUrl: base, nonce: 'drawn', develop: false })
}
