/** The most decimals in a column of reported numbers, to which the others are set out so that their points align. */
export function mostDecimals(texts: readonly string[]): number {
  return Math.max(0, ...texts.map((text) => /[.,](\d+)\s*$/.exec(text)?.[1]?.length ?? 0))
}
