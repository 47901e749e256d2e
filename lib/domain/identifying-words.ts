/** The first of the words (names, towns, addresses, domains) that stands in the text, whatever its case or accents. */
export function findIdentifyingWord(text: string, words: readonly string[]): string | undefined {
  const folded = ` ${fold(text)} `
  return words.find((word) => {
    const sought = fold(word)
    return (
      sought.length >= 3 &&
      new RegExp(`(?<![\\p{L}\\p{N}])${escape(sought)}(?![\\p{L}\\p{N}])`, 'u').test(folded)
    )
  })
}

function fold(text: string): string {
  return text.normalize('NFKD').replace(/\p{M}/gu, '').toLocaleLowerCase('en').replace(/\s+/g, ' ').trim()
}

function escape(text: string): string {
  return text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&')
}
