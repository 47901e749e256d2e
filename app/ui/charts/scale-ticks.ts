/** Round values, about `count` of them, that cover a range: steps of 1, 2 or 5 times a power of ten. */
export function scaleTicks({ low, high, count }: { low: number; high: number; count: number }): number[] {
  const rough = (high - low) / count
  if (!(rough > 0)) return [low]
  const power = 10 ** Math.floor(Math.log10(rough))
  const step = power * ([1, 2, 5].find((factor) => factor * power >= rough) ?? 10)
  const first = Math.ceil(low / step - 1e-9)
  const last = Math.floor(high / step + 1e-9)
  return Array.from({ length: last - first + 1 }, (_, index) => (first + index) * step)
}

/** As many decimals as tell neighbouring ticks apart. */
export function tickDecimals(ticks: readonly number[]): number {
  const [first, second] = ticks
  if (first === undefined || second === undefined) return 0
  return Math.max(0, -Math.floor(Math.log10(Math.abs(second - first)) + 1e-9))
}
