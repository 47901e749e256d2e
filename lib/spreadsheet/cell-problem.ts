import { shortenText } from '@/lib/domain/reported-value'
import type { SheetCell } from '@/lib/spreadsheet/workbook'

/** One thing in a file that keeps it from being taken, with where it is and what would put it right. */
export type CellProblem = {
  sheet: string
  /** Null where something is absent, as a whole column. */
  cell: string | null
  /** The title of the column, as it stands in the file. */
  column: string | null
  found: string
  wanted: string
  code: string
  message: string
}

export function describeProblem({
  advice,
  found,
  ...problem
}: Omit<CellProblem, 'message'> & { advice: string }): CellProblem {
  const short = shortenText(found, 60)
  const where = problem.cell === null ? problem.sheet : `${problem.sheet}!${problem.cell}`
  const title = problem.column === null || problem.cell === null ? '' : `, ${shortenText(problem.column, 60)}`
  const quoted = problem.cell === null ? short : `“${short}”`
  return {
    ...problem,
    found: short,
    message: `${where}${title}: found ${quoted}, wanted ${problem.wanted}. ${advice}`,
  }
}

/** Cells that hold something other than what a person typed as a text or a number. */
export function refuseKind({ kind }: SheetCell): { code: string; advice: string } | undefined {
  switch (kind) {
    case 'formula':
      return { code: 'formula', advice: 'Put the value in place of the formula.' }
    case 'error':
      return { code: 'error-cell', advice: 'The cell shows an error. Correct it or leave it empty.' }
    case 'date':
      return {
        code: 'date',
        advice:
          'The cell holds a date, which a program may have made of what was typed. Format it as text and type it again.',
      }
    case 'boolean':
      return {
        code: 'boolean',
        advice: 'The cell holds true or false. Type it again as text or as a number.',
      }
    case 'text':
    case 'number':
      return undefined
  }
}
