import { describe, expect, it } from 'vitest'
import { findIdentifyingWord } from '@/lib/domain/identifying-words'

const words = ['Quay Street Laboratory', 'Zürich', 'quay.example', 'C++ Institute', 'ab']

describe('a word that names a laboratory', () => {
  it.each([
    ['The Quay Street Laboratory wrote to us.', 'Quay Street Laboratory'],
    ['quay   street\nlaboratory', 'Quay Street Laboratory'],
    ['Results from ZURICH look alike.', 'Zürich'],
    ['Zu\u0308rich', 'Zürich'],
    ['see post@quay.example', 'quay.example'],
    ['the c++ institute', 'C++ Institute'],
  ])('is found in “%s”', (text, word) => {
    expect(findIdentifyingWord(text, words)).toBe(word)
  })

  it.each([
    'The cell was set aside: the balance drifted.',
    'zurichberg',
    'quayside',
    'quayXexample',
    'ab',
    '',
  ])('is not seen in “%s”', (text) => {
    expect(findIdentifyingWord(text, words)).toBeUndefined()
  })
})
