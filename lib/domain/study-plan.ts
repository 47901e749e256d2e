import { z } from 'zod'

const words = (name: string, most: number) =>
  z
    .string()
    .trim()
    .min(1, { error: `Give ${name}.`, abort: true })
    .max(most, `Keep ${name} within ${most} characters.`)
    .refine((text) => !/[\p{Cc}\p{Cf}]/u.test(text), `Leave control characters out of ${name}.`)

/** Rows of a form that were left empty are no rows. */
const filled = <Rows extends z.ZodType>(rows: Rows) =>
  z.preprocess((typed) => (Array.isArray(typed) ? typed.filter((row) => !isBlank(row)) : []), rows)

function isBlank(row: unknown): boolean {
  if (!row || typeof row !== 'object') return true
  // A choice always has some value, so only what is typed counts as filling a row.
  return Object.entries(row).every(([key, value]) => key === 'hasTrueZero' || !String(value ?? '').trim())
}

/** A checkbox sends "on" or nothing at all. */
const ticked = z.preprocess((value) => value === true || value === 'on' || value === 'true', z.boolean())

/** A box left empty holds no number, and above all not nought. */
const wholeNumber = (missing: string, least: number, most: number) =>
  z.preprocess(
    (typed) => (typeof typed === 'string' && !typed.trim() ? undefined : typed),
    z.coerce
      .number(missing)
      .int('Give a whole number.')
      .min(least, `From ${least} to ${most}.`)
      .max(most, `From ${least} to ${most}.`),
  )

export const measurandPlan = z.object({
  name: words('the name of the measurand', 60),
  unit: words('the unit', 20),
  decimals: wholeNumber('Give the number of decimals.', 0, 12),
  hasTrueZero: ticked.default(true),
})

export const materialPlan = z.object({
  name: words('the name of the material', 60),
  description: z.string().trim().max(300, 'Keep the description within 300 characters.').default(''),
})

export const levelPlan = z.object({
  name: words('the name of the level', 30).refine(
    (name) => !/[,;"]/.test(name),
    'Leave commas, semicolons and quotation marks out of the name of a level.',
  ),
  count: wholeNumber('Give how many.', 1, 50),
})

/** The most single results one return may hold; the upload reader has the same order of limit. */
export const mostPlaces = 5000

/** What a coordinator settles before inviting: one schema for the form, the use case and the seed. */
export const studyPlan = z
  .object({
    shortName: words('a short name', 20).regex(
      /^[\p{L}\p{N}][\p{L}\p{N} ./-]*$/u,
      'Use letters, digits, spaces, points, slashes and hyphens in the short name.',
    ),
    title: words('a title', 120),
    method: words('the test method', 160),
    purpose: z.string().trim().max(1000, 'Keep the purpose within 1000 characters.').default(''),
    limitFactor: z.enum(['2.8', '2.77'], 'Choose 2.8 or 1.96·√2.').default('2.8'),
    measurands: filled(
      z.array(measurandPlan).min(1, 'Name at least one measurand.').max(10, 'Ten measurands at most.'),
    ),
    materials: filled(
      z.array(materialPlan).min(1, 'Name at least one material.').max(50, 'Fifty materials at most.'),
    ),
    levels: filled(
      z
        .array(levelPlan)
        .min(1, 'Say how many replicates each cell holds.')
        .max(4, 'Four levels at most within a laboratory.'),
    ),
    localTime: z.string().trim(),
    zone: z.string().trim(),
    choice: z
      .enum(['earlier', 'later'])
      .optional()
      .or(z.literal('').transform(() => undefined)),
  })
  .superRefine((plan, context) => {
    for (const key of ['measurands', 'materials', 'levels'] as const) {
      const seen = new Map<string, number>()
      plan[key].forEach((row, index) => {
        const name = row.name.toLocaleLowerCase('en')
        if (seen.has(name))
          context.addIssue({
            code: 'custom',
            path: [key, index, 'name'],
            message: `“${row.name}” is named twice.`,
          })
        seen.set(name, index)
      })
    }
    plan.levels.forEach((level, index) => {
      const name = level.name.toLocaleLowerCase('en')
      const isInnermost = index === plan.levels.length - 1
      if (reservedNames.has(name) || (name === 'replicate' && !isInnermost))
        context.addIssue({
          code: 'custom',
          path: ['levels', index, 'name'],
          message: reservedWords(level.name),
        })
    })
    const places =
      plan.measurands.length *
      plan.materials.length *
      plan.levels.reduce((product, level) => product * level.count, 1)
    if (places > mostPlaces)
      context.addIssue({
        code: 'custom',
        path: ['levels'],
        message: `This asks each laboratory for ${places} results; ${mostPlaces} is the most.`,
      })
  })

/** Words that head other columns of a sheet, or rows of an analysis of variance; a level so named would be taken for them. */
const reservedNames = new Set([
  'laboratory',
  'lab',
  'material',
  'measurand',
  'value',
  'result',
  'excluded',
  'order',
  'uncertainty',
  'residual',
])

function reservedWords(name: string): string {
  if (name.toLocaleLowerCase('en') === 'laboratory')
    return 'The laboratory is always the outermost level; name only the levels within it.'
  return `“${name}” heads another column of the sheet; give the level another name.`
}

export type StudyPlan = z.infer<typeof studyPlan>

/** The number of single results a plan asks of each laboratory. */
export function countPlaces(plan: {
  measurands: readonly unknown[]
  materials: readonly unknown[]
  levels: readonly { count: number }[]
}): number {
  return (
    plan.measurands.length *
    plan.materials.length *
    plan.levels.reduce((product, level) => product * level.count, 1)
  )
}
