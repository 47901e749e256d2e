/**
 * The cells of a block copied from a spreadsheet: tabs between columns, line ends between rows, quotes round a
 * cell that holds either. Null for a plain text, which goes where the caret is.
 */
export function readPastedBlock(text: string): string[][] | null {
  if (!/[\t\r\n]/.test(text)) return null
  const rows: string[][] = [[]]
  let cell = ''
  let isQuoted = false
  const endCell = () => {
    rows.at(-1)?.push(cell.trim())
    cell = ''
  }
  const lines = text.replace(/\r\n?/g, '\n').replace(/\n$/, '')
  for (let at = 0; at < lines.length; at += 1) {
    const sign = lines.charAt(at)
    if (isQuoted) {
      if (sign !== '"') cell += sign
      else if (lines.charAt(at + 1) === '"') cell += lines.charAt((at += 1))
      else isQuoted = false
    } else if (sign === '"' && cell === '') isQuoted = true
    else if (sign === '\t') endCell()
    else if (sign === '\n') {
      endCell()
      rows.push([])
    } else cell += sign
  }
  endCell()
  return rows
}
