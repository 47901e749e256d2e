import { writeReturnWorkbook } from '@/lib/spreadsheet/write-return-workbook'
import { readSheet } from '@/lib/use-cases/returns/read-participation'
import { routeHandler } from '@/lib/web/route-handler'
import { attachment } from '../../attachment'
import { schemas } from '../../schemas'

const workbookType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'

/** The workbook to fill in, empty or with what was entered so far. Neither it nor its name says whose it is. */
export const GET = routeHandler({
  params: schemas.studyParams,
  run: async (context, { request, params: { studyId } }) => {
    const { filled } = schemas.workbookQuery.parse(Object.fromEntries(new URL(request.url).searchParams))
    const { view, entries } = await readSheet(context, { studyId })
    const bytes = await writeReturnWorkbook({
      layout: view.layout,
      values: new Map(filled ? Object.entries(entries) : []),
      deadlineText: `${view.due.text}, ${view.due.zoneText}`,
    })
    return attachment({ fileName: `${view.study.shortName} results.xlsx`, bytes, type: workbookType })
  },
})
