import { Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { timeZones } from '@/lib/domain/time-zones'
import { splitLaboratoryLines, type LaboratoryLine } from '@/lib/domain/split-laboratory-lines'
import { laboratoryInvitation, type LaboratoryInvitation } from './invite-laboratory'

export interface CheckedLines {
  readonly invitations: readonly LaboratoryInvitation[]
  /** In the order of the lines, each beginning with its line. */
  readonly problems: readonly string[]
}

const most = 200

/** Reads pasted lines as invitations and says of each line what keeps it from being one. Writes nothing. */
export function checkLaboratoryLines(text: string): CheckedLines {
  const lines = splitLaboratoryLines(text)
  if (lines.length === 0) return { invitations: [], problems: ['Paste one line a laboratory.'] }
  if (lines.length > most)
    return {
      invitations: [],
      problems: [`Paste ${most} lines at most at a time; these are ${lines.length}.`],
    }
  const invitations: LaboratoryInvitation[] = []
  const problems: string[] = []
  const seen = new Map<string, number>()
  for (const line of lines) {
    const found = [...repeatedName(line, seen), ...readLine(line, invitations)]
    problems.push(...found.map((words) => `Line ${line.line}: ${words}`))
  }
  return { invitations, problems }
}

function repeatedName({ laboratory, line }: LaboratoryLine, seen: Map<string, number>): string[] {
  const name = laboratory.toLocaleLowerCase('en')
  const earlier = seen.get(name)
  seen.set(name, line)
  return name && earlier !== undefined ? [`“${laboratory}” stands in line ${earlier} already.`] : []
}

function readLine(line: LaboratoryLine, invitations: LaboratoryInvitation[]): string[] {
  if (line.parts !== 6)
    return [
      `${line.parts} ${line.parts === 1 ? 'part' : 'parts'} instead of 6: laboratory; town; country; contact; address; zone.`,
    ]
  const parsed = laboratoryInvitation.safeParse({ ...line, zone: findZone(line.zone) ?? line.zone })
  const problems = parsed.success ? [] : parsed.error.issues.map(({ message }) => message)
  try {
    readMailAddress(line.address)
  } catch (error) {
    if (!(error instanceof Refusal)) throw error
    problems.push(`“${line.address}” is not one mail address.`)
  }
  if (parsed.success && problems.length === 0) invitations.push(parsed.data)
  return problems
}

/** A zone by its full name, or by the place alone where only one zone has it: "Lisbon". */
function findZone(typed: string): string | undefined {
  const sought = typed.trim().replaceAll(' ', '_').toLowerCase()
  const exact = timeZones.find((zone) => zone.toLowerCase() === sought)
  if (exact) return exact
  const ofPlace = timeZones.filter((zone) => zone.toLowerCase().endsWith(`/${sought}`))
  return ofPlace.length === 1 ? ofPlace[0] : undefined
}
