import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { operations } from '@/app/api/openapi.json/operations'
import { describeApi } from '@/lib/web/openapi'

const folder = fileURLToPath(new URL('../../app/api', import.meta.url))
const document = describeApi(operations, 'https://studies.example')

/** Every method a handler of the folder answers, as "GET /api/…". */
function handled(): string[] {
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter((file) =>
    file.endsWith('route.ts'),
  )
  return files.flatMap((file) => {
    const path = `/api/${file.replace(/\/?route\.ts$/, '').replace(/\[(?:\.\.\.)?(\w+)\]/g, '{$1}')}`
    const source = readFileSync(`${folder}/${file}`, 'utf8')
    const methods = [
      ...source.matchAll(/export (?:const|async function|function) (GET|POST|PUT|PATCH|DELETE)\b/g),
    ]
    expect(methods.length, `${file} exports a method`).toBeGreaterThan(0)
    return methods.map(([, method]) => `${method} ${path}`)
  })
}

const described = Object.entries(document.paths ?? {}).flatMap(([path, methods]) =>
  Object.keys(methods as object).map((method) => `${method.toUpperCase()} ${path}`),
)

describe('the described interface', () => {
  it('has every handler under app/api, and nothing that is not there', () => {
    expect(described.sort()).toEqual(handled().sort())
  })

  it('says of each operation who may ask, and of each refusal what it looks like', () => {
    const answers = document.paths?.['/api/studies/{studyId}/returns']?.get
    expect(answers?.security).toEqual([{ session: [] }])
    expect(Object.keys(answers?.responses ?? {}).sort()).toEqual(['200', '400', '401', '404', '500'])
  })

  it('describes the lanes by the very schema the handler answers with', () => {
    const text = JSON.stringify(document.paths?.['/api/studies/{studyId}/returns']?.get?.responses?.['200'])
    for (const field of ['code', 'draftEntries', 'asksForTime', 'returnedAt'])
      expect(text).toContain(`"${field}"`)
    for (const word of ['laboratoryName', 'address', 'participantId', 'remark'])
      expect(text).not.toContain(word)
  })

  it('is a document of version 3.1 that is plain data', () => {
    expect(document.openapi).toBe('3.1.0')
    expect(JSON.parse(JSON.stringify(document))).toEqual(document)
  })
})
