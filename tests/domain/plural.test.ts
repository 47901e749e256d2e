import { describe, expect, it } from 'vitest'
import { counted, plural } from '@/lib/domain/plural'

describe('the plural of a level', () => {
  it('is English where the word is, and left alone where it is a sign', () => {
    expect(['day', 'batch', 'mix', 'Tag 2', 'gas'].map(plural)).toEqual([
      'days',
      'batches',
      'mixes',
      'Tag 2',
      'gas',
    ])
  })

  it('is used from two on, and for none', () => {
    expect([0, 1, 2].map((count) => counted(count, 'batch'))).toEqual(['0 batches', '1 batch', '2 batches'])
  })
})
