import { describe, expect, it } from 'vitest'
import { jobDefinitions } from '@/lib/jobs/definitions'
import { queueNames } from '@/lib/jobs/queues'
import { jobHandlers, requireWholeRegistry } from '@/lib/jobs/registry'

describe('the worker’s registry', () => {
  it('gives each queue one handler and one definition', () => {
    expect(() => requireWholeRegistry()).not.toThrow()
    expect(Object.keys(jobHandlers).sort()).toEqual([...queueNames].sort())
  })

  it('refuses to start without a handler, naming the queue', () => {
    const { 'mail.send': _left, ...rest } = jobHandlers
    expect(() => requireWholeRegistry(rest)).toThrow('mail.send has no handler')
  })

  it('refuses to start with a handler that no queue has', () => {
    expect(() => requireWholeRegistry({ ...jobHandlers, 'mail.sned': () => undefined })).toThrow(
      'mail.sned is no queue',
    )
  })

  it('refuses to start without a definition', () => {
    const { 'analysis.run': _left, ...rest } = jobDefinitions
    expect(() => requireWholeRegistry(jobHandlers, rest)).toThrow('analysis.run has no definition')
  })
})

describe('a job’s payload', () => {
  it('holds ids and nothing else', () => {
    const id = '5a1f7a50-93b5-4a5c-8a50-0b6ac0f2b7c1'
    expect(jobDefinitions['mail.send'].payload.safeParse({ mailId: 'ada@quill.example' }).success).toBe(false)
    expect(jobDefinitions['mail.send'].payload.parse({ mailId: id, recipient: 'eve@evil.example' })).toEqual({
      mailId: id,
    })
    expect(jobDefinitions['analysis.run'].payload.safeParse({ studyId: id, number: '1' }).success).toBe(false)
  })
})
