/** A name as it stands within a sentence: "Breaking force" → "breaking force", but "pH" and "PCB content" stay. */
export function withinSentence(name: string): string {
  return /^\p{Lu}\p{Ll}/u.test(name) ? name.charAt(0).toLowerCase() + name.slice(1) : name
}
