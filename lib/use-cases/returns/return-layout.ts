import type { StudyLayoutRecord } from '@/db/queries/studies'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'

/** The study's layout in the shape in which forms and workbooks know it. */
export function toReturnLayout(shortName: string, layout: StudyLayoutRecord): ReturnLayout {
  return {
    studyShortName: shortName,
    measurands: layout.measurands.map(({ measurandId, name, unit, decimals }) => ({
      id: measurandId,
      name,
      unit,
      decimals,
    })),
    materials: layout.materials.map(({ materialId, name }) => ({ id: materialId, name })),
    levels: layout.levels,
  }
}
