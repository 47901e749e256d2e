import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { NotFound, Refusal, SignInNeeded } from '@/lib/domain/errors'
import { answerRequest } from '@/lib/web/answer-request'

const baseUrl = 'http://localhost:3000'
const ask = (run: () => Promise<unknown>, path = '/api/studies') =>
  answerRequest(new Request(`${baseUrl}${path}`), { baseUrl, run })

const logged: string[] = []
beforeEach(() => {
  logged.length = 0
  vi.spyOn(process.stdout, 'write').mockImplementation((chunk) => (logged.push(String(chunk)), true))
})
afterEach(() => vi.restoreAllMocks())

describe('a handler', () => {
  it.each([
    [
      new Refusal('wrong-state', 'The study is published.'),
      409,
      { code: 'wrong-state', message: 'The study is published.' },
    ],
    [
      new Refusal('bad-address', 'Give one mail address.', 'address'),
      422,
      { code: 'bad-address', field: 'address' },
    ],
    [new Refusal('too-many', 'Wait an hour.'), 429, { code: 'too-many' }],
    [new Refusal('too-large', 'Send less.'), 413, { code: 'too-large' }],
    [new NotFound('study'), 404, { code: 'not-found' }],
    [new SignInNeeded(), 401, { code: 'sign-in-needed' }],
    [
      faultOf(z.object({ rows: z.array(z.object({ value: z.string() })) }), { rows: [{ value: 7 }] }),
      400,
      { code: 'bad-request' },
    ],
  ])('answers %s with its status and words made for people', async (error, status, said) => {
    const response = await ask(() => Promise.reject(error))
    expect(response.status).toBe(status)
    expect(await response.json()).toMatchObject({ error: said })
    expect(logged).toEqual([])
  })

  it('says of a defect only where to ask, and logs it once without its words', async () => {
    const error = Object.assign(new Error('duplicate key (email)=(ada@quill.example) secret 12.345'), {
      code: '23505',
    })
    const response = await ask(
      () => Promise.reject(error),
      '/api/studies/3f1c1b1e-7d0e-4f57-9d7e-0f7b3c1f0a11',
    )
    expect(response.status).toBe(500)
    const body = JSON.stringify(await response.json())
    expect(body).not.toMatch(/ada@|12\.345|duplicate/)
    const reference = /"reference":"([0-9a-f]{8})"/.exec(body)?.[1]
    expect(logged).toHaveLength(1)
    expect(JSON.parse(logged[0] ?? '')).toMatchObject({
      reference,
      place: 'GET /api/studies/…',
      code: '23505',
      kind: 'Error',
    })
    expect(logged[0]).not.toMatch(/ada@|12\.345|duplicate|3f1c1b1e/)
  })

  it('carries the headers that the proxy gives to pages', async () => {
    for (const run of [
      async () => ({}),
      () => Promise.reject(new NotFound('x')),
      async () => new Response('text'),
    ]) {
      const { headers } = await ask(run)
      expect(headers.get('cache-control')).toBe('private, no-store')
      expect(headers.get('x-content-type-options')).toBe('nosniff')
      expect(headers.get('cross-origin-resource-policy')).toBe('same-origin')
      expect(headers.get('content-security-policy')).toContain("default-src 'none'")
    }
  })

  it('leaves a handler its own word on caching, its status and its cookies', async () => {
    const own = new Response('text', { status: 202, headers: { 'Cache-Control': 'public, max-age=60' } })
    own.headers.append('Set-Cookie', 'a=1')
    own.headers.append('Set-Cookie', 'b=2')
    const response = await ask(async () => own)
    expect(response.status).toBe(202)
    expect(response.headers.get('cache-control')).toBe('public, max-age=60')
    expect(response.headers.getSetCookie()).toEqual(['a=1', 'b=2'])
  })
})

function faultOf(schema: z.ZodType, value: unknown): unknown {
  const parsed = schema.safeParse(value)
  return parsed.error
}
