import { formatFigure } from './format-figure'

interface FigureProps {
  /** The number as reported or as rounded by whoever decides its digits. */
  value: string
  unit?: string
  /** The most decimals in the column; shorter numbers are padded so that their points stand under each other. */
  alignTo?: number
}

export function Figure({ value, unit, alignTo }: FigureProps) {
  const missing = alignTo === undefined ? 0 : missingCharacters(value, alignTo)
  return (
    <span className="whitespace-nowrap font-mono">
      {formatFigure(value)}
      {missing > 0 && (
        <span aria-hidden="true" className="inline-block select-none" style={{ width: `${missing}ch` }} />
      )}
      {unit && `\u00a0${unit}`}
    </span>
  )
}

function missingCharacters(value: string, alignTo: number): number {
  const decimals = /\.(\d+)/.exec(value)?.[1]?.length ?? 0
  if (decimals >= alignTo) return 0
  // A whole number lacks the point as well.
  return alignTo - decimals + (decimals === 0 ? 1 : 0)
}
