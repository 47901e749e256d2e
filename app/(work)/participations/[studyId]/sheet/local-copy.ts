import type { SheetContent } from './send-draft'

/** What this browser tab holds of a sheet, with the version of the draft it grew from. */
export interface LocalCopy extends SheetContent {
  readonly version: number
  /** The server has it too. */
  readonly isKept: boolean
}

export interface LocalCopies {
  read(): LocalCopy | null
  write(copy: LocalCopy): void
}

const prefix = 'evenlot.sheet.'

/**
 * The copy of one laboratory's sheet before one return: a copy from before a return does not outlive it. Storage
 * may be full or forbidden; then the server's draft alone has to do.
 */
export function localCopies({
  studyId,
  code,
  returns,
}: {
  studyId: string
  code: string
  returns: number
}): LocalCopies {
  const key = `${prefix}${studyId}.${code}.${returns}`
  return {
    read() {
      try {
        return JSON.parse(sessionStorage.getItem(key) ?? 'null') as LocalCopy | null
      } catch {
        return null
      }
    },
    write(copy) {
      try {
        sessionStorage.setItem(key, JSON.stringify(copy))
      } catch {
        // Nothing is lost that the server does not get by itself.
      }
    },
  }
}

/** After a return nothing of the sheet stays behind in the browser. */
export function forgetLocalCopies(studyId: string): void {
  try {
    for (const key of Object.keys(sessionStorage))
      if (key.startsWith(`${prefix}${studyId}.`)) sessionStorage.removeItem(key)
  } catch {
    // Where storage is forbidden there is nothing to forget.
  }
}
