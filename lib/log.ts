import { randomUUID } from 'node:crypto'
import pino from 'pino'

// Everything logged passes through the functions below, which take no address, token or value.
// Lines go out by the process's own stream, so that what captures that stream captures them too.
const stream = { write: (line: string) => void process.stdout.write(line) }
const logger = pino({ base: null, level: process.env.LOG_LEVEL ?? 'info' }, stream)

/**
 * Logs a defect once and returns the reference a person can quote.
 *
 * A driver's message may hold a value from a row; kept are the kind of error, its code and where it arose.
 */
export function logDefect(error: unknown, { place }: { place: string }): string {
  const reference = randomUUID().slice(0, 8)
  logger.error({ reference, place, ...describeDefect(error) }, 'defect')
  return reference
}

export function logEvent(event: string, details: Record<string, string | number | boolean> = {}): void {
  logger.info(details, event)
}

function describeDefect(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { kind: typeof error }
  const { code, constraint, table } = error as { code?: unknown; constraint?: unknown; table?: unknown }
  const calls = (error.stack ?? '').split('\n').filter((line) => /^\s+at /.test(line))
  return { kind: error.name, code, constraint, table, calls: calls.slice(0, 12).map((line) => line.trim()) }
}
