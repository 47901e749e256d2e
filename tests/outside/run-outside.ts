import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { runProgram } from '@/lib/commands/run-program'

/** Debian's own, whatever other interpreter comes first in the path: that is the one its packages serve. */
export const DEBIANS_PYTHON = '/usr/bin/python3'

export type OutsideProgram = 'Rscript' | typeof DEBIANS_PYTHON

/** One batch for a program of another hand: it reads one file, writes another, and its lines come back as records. */
export async function runOutside(of: {
  program: OutsideProgram
  script: string
  input: readonly (readonly (string | number)[])[]
}): Promise<Record<string, string>[]> {
  const folder = mkdtempSync(join(tmpdir(), 'outside-'))
  try {
    const [input, output] = [join(folder, 'input.csv'), join(folder, 'output.csv')]
    writeFileSync(input, of.input.map((row) => `${row.join(',')}\n`).join(''))
    await runProgram(of.program, [join(import.meta.dirname, of.script), input, output])
    const [header, ...lines] = readFileSync(output, 'utf8').trim().split('\n')
    const names = header!.split(',')
    return lines.map((line) =>
      Object.fromEntries(line.split(',').map((value, index) => [names[index]!, value])),
    )
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
