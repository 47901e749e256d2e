import { parseArgs } from 'node:util'
import { isReservedLevel } from '@/lib/commands/reserved-levels'
import { readPlanOption } from '@/lib/commands/read-plan-option'
import { type AnalysisSettings, decimalToNumber, parseDecimal } from '@/lib/statistics'

/** What the command line of `analyse` asks for. */
export type AnalyseOptions = {
  /** `null` with `--plan`, which needs none. */
  file: string | null
  nesting: string[]
  columns: Map<string, string>
  keepExcluded: boolean
  measurand: string | null
  /** The unit of the results, whose neighbours are tried where a cell stands apart. */
  unit: string | null
  settings: AnalysisSettings
}

export const ANALYSE_USAGE =
  'usage: analyse FILE [--nest operator,day] [--factor 2.8] [--columns laboratory=Lab,value=Conc] [--all] ' +
  '[--measurand NAME] [--reference A=41.5:0.05] [--sigma A=0.6] [--pairs A:B,C:D] [--decimals A=2] ' +
  '[--no-true-zero] [--homogeneity] | --plan p=8..30,n=2,gamma=2 | --plan p=8..30,day=2,n=2,gamma=2,share=0.4,within=0.3'

/** Reads the arguments; each thing that is wrong is one line of `problems`. */
export function readAnalyseOptions(
  args: readonly string[],
): { options: AnalyseOptions; problems: [] } | { options: null; problems: string[] } {
  let given: ReturnType<typeof parseGiven>
  try {
    given = parseGiven(args)
  } catch (error) {
    const words = error instanceof Error ? error.message : String(error)
    return { options: null, problems: [words.split('\n')[0]!, ANALYSE_USAGE] }
  }
  const problems: string[] = []
  const { values, positionals } = given
  const fault = (option: string, found: string, expected: string): void => {
    problems.push(`option --${option}: found ${JSON.stringify(found)}, expected ${expected}`)
  }

  const plan =
    values.plan === undefined
      ? undefined
      : readPlanOption(values.plan, (found, expected) => fault('plan', found, expected))
  if (plan === undefined && positionals.length !== 1) {
    problems.push(`found ${positionals.length} files, expected one`, ANALYSE_USAGE)
  }
  const nesting = list(values.nest)
  if (new Set(nesting).size !== nesting.length) fault('nest', values.nest!, 'each level once')
  if (nesting.some(isReservedLevel)) {
    fault('nest', values.nest!, 'inner levels only, neither laboratory nor replicate')
  }

  const settings: AnalysisSettings = {
    limitFactor: positive('factor', values.factor ?? '2.8', fault),
    references: entries('reference', values.reference, fault, (text) => readReference(text)),
    sigmas: entries('sigma', values.sigma, fault, (text) => above0(text)),
    decimals: entries('decimals', values.decimals, fault, (text) =>
      /^\d{1,2}$/.test(text) ? Number(text) : null,
    ),
    trueZero: !(values['no-true-zero'] ?? false),
    units: Object.entries(entries('other-unit', values['other-unit'], fault, above0)).map(
      ([name, factor]) => ({
        name,
        factor,
      }),
    ),
    homogeneity: values.homogeneity ?? false,
    ...(values.pairs === undefined ? {} : { pairs: readPairs(values.pairs, fault) }),
    ...(plan === undefined || plan === null ? {} : { plan }),
  }
  const columns = new Map(Object.entries(entries('columns', splitAll(values.columns), fault, (text) => text)))

  if (problems.length > 0) return { options: null, problems }
  return {
    options: {
      file: positionals[0] ?? null,
      nesting,
      columns,
      keepExcluded: values.all ?? false,
      measurand: values.measurand ?? null,
      unit: values.unit ?? null,
      settings,
    },
    problems: [],
  }
}

type Fault = (option: string, found: string, expected: string) => void

function parseGiven(args: readonly string[]) {
  return parseArgs({
    args: [...args],
    allowPositionals: true,
    options: {
      nest: { type: 'string' },
      factor: { type: 'string' },
      columns: { type: 'string' },
      all: { type: 'boolean' },
      measurand: { type: 'string' },
      reference: { type: 'string', multiple: true },
      sigma: { type: 'string', multiple: true },
      pairs: { type: 'string' },
      decimals: { type: 'string', multiple: true },
      'no-true-zero': { type: 'boolean' },
      unit: { type: 'string' },
      'other-unit': { type: 'string', multiple: true },
      homogeneity: { type: 'boolean' },
      plan: { type: 'string' },
    },
  })
}

function list(text: string | undefined): string[] {
  return (text ?? '')
    .split(',')
    .map((one) => one.trim())
    .filter((one) => one !== '')
}

function splitAll(text: string | undefined): string[] {
  return list(text)
}

function positive(option: string, text: string, fault: Fault): number {
  const value = above0(text)
  if (value === null) fault(option, text, 'a number above 0')
  return value ?? 0
}

function above0(text: string): number | null {
  const value = decimal(text)
  return value !== null && value > 0 ? value : null
}

function decimal(text: string): number | null {
  try {
    const value = decimalToNumber(parseDecimal(text))
    return Number.isFinite(value) ? value : null
  } catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}

/** `A=…` entries; the name may itself hold an equals sign, the value may not. */
function entries<Value>(
  option: string,
  texts: readonly string[] | undefined,
  fault: Fault,
  read: (text: string) => Value | null,
): Record<string, Value> {
  const found: [string, Value][] = []
  for (const text of texts ?? []) {
    const cut = text.lastIndexOf('=')
    const value = cut < 1 ? null : read(text.slice(cut + 1).trim())
    if (value === null) fault(option, text, `NAME=${EXPECTED[option] ?? 'VALUE'}`)
    else found.push([text.slice(0, cut).trim(), value])
  }
  // From entries, so that a name such as __proto__ is one like any other.
  return Object.fromEntries(found)
}

const EXPECTED: Readonly<Record<string, string>> = {
  reference: 'VALUE:UNCERTAINTY',
  sigma: 'a number above 0',
  decimals: 'a number of decimals',
  'other-unit': 'a number above 0',
  columns: 'HEADING',
}

function readReference(text: string): { value: string; uncertainty: number } | null {
  const [value = '', uncertainty = '0', ...more] = text.replaceAll('\u2212', '-').split(':')
  const u = decimal(uncertainty)
  return more.length > 0 || decimal(value) === null || u === null || u < 0 ? null : { value, uncertainty: u }
}

function readPairs(text: string, fault: Fault): [string, string][] {
  return list(text).flatMap((pair): [string, string][] => {
    const [x, y, ...more] = pair.split(':')
    if (x === undefined || y === undefined || x === '' || y === '' || x === y || more.length > 0) {
      fault('pairs', pair, 'two materials, A:B')
      return []
    }
    return [[x, y]]
  })
}
