/**
 * How narrow a plot may become before its region scrolls instead. One that fits a page shrinks by a quarter,
 * and stays legible; one that must scroll anyway gains nothing from small print.
 */
export function leastWidth(drawnWidth: number): number {
  return Math.round(drawnWidth * (drawnWidth > 1100 ? 0.94 : 0.75))
}
