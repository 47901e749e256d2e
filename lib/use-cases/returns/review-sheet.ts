import type { Context } from '@/lib/context'
import { readEntries, type ReadEntries } from './read-entries'
import { readSheet } from './read-participation'

export type SheetReview = Awaited<ReturnType<typeof readSheet>> & { readonly read: ReadEntries }

/** What the sheet holds and how it reads: for the sheet itself, and for the look at it before it is returned. */
export async function reviewSheet(context: Context, { studyId }: { studyId: string }): Promise<SheetReview> {
  const sheet = await readSheet(context, { studyId })
  return { ...sheet, read: readEntries(sheet.view.layout, sheet.entries) }
}
