import { SaxesParser } from 'saxes'
import { Refusal } from '@/lib/domain/errors'

/*
 * Walks one part of a workbook tag by tag. Declarations of documents and entities are refused before the
 * parser could act on them, and a text without end is cut off while it is still being gathered.
 */

export type XmlHandlers = {
  /** Names come without their namespace prefix, which producers choose freely. */
  open?(name: string, attributes: Record<string, string>): void
  close?(name: string): void
  text?(text: string): void
}

export type XmlBudget = { elements: number; run: number }

/** `budget.elements` is drawn down across all parts of one workbook. */
export async function parseXml(
  chunks: AsyncIterable<string>,
  handlers: XmlHandlers,
  budget: XmlBudget,
): Promise<void> {
  const parser = new SaxesParser()
  let run = 0
  parser.on('doctype', () => {
    throw new Refusal(
      'workbook-declares-entities',
      'This workbook declares a document type or entities, as no spreadsheet program does. Save it again as .xlsx.',
    )
  })
  parser.on('xmldecl', ({ encoding }) => {
    if (encoding === undefined || /^utf-?8$/i.test(encoding)) return
    throw new Refusal('workbook-encoding', 'The text in this workbook is not UTF-8. Save it again as .xlsx.')
  })
  parser.on('error', () => {
    throw new Refusal(
      'workbook-damaged',
      'A part of this workbook is not well formed. Save it again as .xlsx and send that copy.',
    )
  })
  parser.on('opentag', ({ name, attributes }) => {
    run = 0
    if (--budget.elements < 0) {
      throw new Refusal(
        'workbook-too-complex',
        'This workbook holds far more rows, cells or formats than a return. Copy the results to a new workbook.',
      )
    }
    handlers.open?.(localName(name), attributes)
  })
  parser.on('closetag', ({ name }) => {
    run = 0
    handlers.close?.(localName(name))
  })
  parser.on('text', (text) => handlers.text?.(text))
  parser.on('cdata', (text) => handlers.text?.(text))

  for await (const chunk of chunks) {
    run += chunk.length
    parser.write(chunk)
    // A chunk may hold many tags; only what came after the last one is an unfinished run.
    if (run > budget.run) {
      throw new Refusal(
        'workbook-text-too-long',
        'This workbook holds a text far longer than a cell can show. Copy the results to a new workbook.',
      )
    }
  }
  parser.close()
}

function localName(name: string): string {
  return name.slice(name.indexOf(':') + 1)
}
