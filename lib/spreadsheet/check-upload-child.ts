import { Refusal } from '@/lib/domain/errors'
import type { UploadCheck, UploadToCheck } from '@/lib/spreadsheet/check-upload'
import { matchReturn } from '@/lib/spreadsheet/match-return'
import { readUpload } from '@/lib/spreadsheet/read-upload'

/*
 * The process in which one uploaded file is read. It says when it is ready, answers once, and ends with the
 * process that asked.
 */

process.once('message', (upload: UploadToCheck) => {
  void answer(upload).then((check) => process.send?.(check))
})
process.on('disconnect', () => process.exit())
process.send?.('ready')

async function answer({ bytes, fileName, layout, decimalMark }: UploadToCheck): Promise<UploadCheck> {
  try {
    const workbook = await readUpload({ bytes, fileName })
    return { outcome: 'checked', check: matchReturn({ workbook, layout, decimalMark }) }
  } catch (error) {
    if (error instanceof Refusal)
      return { outcome: 'refused', code: error.code, message: error.publicMessage }
    // Anything else is a fault of the reader; ending here tells the asking process what it needs to know.
    process.exit(1)
  }
}
