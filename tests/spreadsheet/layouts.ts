import type { ReturnLayout } from '@/lib/spreadsheet/layout'

/** Two measurands, two materials, two days of two replicates: eight rows, sixteen places. */
export const twoByTwo: ReturnLayout = {
  studyShortName: 'Tear 27',
  measurands: [
    { id: 'force', name: 'Breaking force', unit: 'N', decimals: 1 },
    { id: 'strain', name: 'Strain at break', unit: '%', decimals: 2 },
  ],
  materials: [
    { id: 'linen', name: 'Linen, plain' },
    { id: 'wool', name: 'Wool felt' },
  ],
  levels: [
    { name: 'Day', count: 2 },
    { name: 'Replicate', count: 2 },
  ],
}

/** One measurand and one level: the simplest study there is. */
export const single: ReturnLayout = {
  studyShortName: 'Ash 27',
  measurands: [{ id: 'ash', name: 'Ash content', unit: 'g/kg', decimals: 2 }],
  materials: [
    { id: 'rye', name: 'Rye' },
    { id: 'oat', name: 'Oat' },
  ],
  levels: [{ name: 'Replicate', count: 2 }],
}
