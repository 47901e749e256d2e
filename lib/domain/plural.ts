/** The plural of an English word as a person typed it: "day" → "days", "batch" → "batches"; "N" stays. */
export function plural(word: string): string {
  if (!/[a-z]$/.test(word) || word.endsWith('s')) return word
  return /(?:x|ch|sh)$/.test(word) ? `${word}es` : `${word}s`
}

/** "1 replicate", "3 replicates". */
export function counted(count: number, word: string): string {
  return `${count} ${count === 1 ? word : plural(word)}`
}
