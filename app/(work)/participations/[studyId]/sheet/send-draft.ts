export interface SheetContent {
  readonly entries: readonly string[]
  readonly remark: string
}

export type DraftReply =
  | { kind: 'kept'; version: number; savedAt: string }
  | { kind: 'changed-elsewhere'; version: number; content: SheetContent }
  | { kind: 'signed-out' }
  | { kind: 'unreachable' }
  | { kind: 'refused'; message: string }

export type SendDraft = (content: SheetContent, seenVersion: number) => Promise<DraftReply>

interface ReplyBody {
  readonly version: number
  readonly savedAt: string
  readonly entries: Record<string, string>
  readonly remark: string
  readonly error?: { message?: string }
}

/** Puts a draft to its handler; every way in which that can fail is an answer and not a throw. */
export function createSendDraft({ address, keys }: { address: string; keys: readonly string[] }): SendDraft {
  return async ({ entries, remark }, seenVersion) => {
    const byKey = Object.fromEntries(
      keys.flatMap((key, position) => (entries[position] ? [[key, entries[position]]] : [])),
    )
    let response: Response
    let body: ReplyBody
    try {
      response = await fetch(address, {
        method: 'PUT',
        headers: { 'Content-Type': 'application/json' },
        body: JSON.stringify({ entries: byKey, remark, seenVersion }),
      })
      body = (await response.json()) as ReplyBody
    } catch {
      return { kind: 'unreachable' }
    }
    if (response.ok) return { kind: 'kept', version: body.version, savedAt: body.savedAt }
    if (response.status === 409 && body.entries)
      return {
        kind: 'changed-elsewhere',
        version: body.version,
        content: { entries: keys.map((key) => body.entries[key] ?? ''), remark: body.remark },
      }
    if (response.status === 401) return { kind: 'signed-out' }
    if (response.status >= 500) return { kind: 'unreachable' }
    return { kind: 'refused', message: body.error?.message ?? 'The draft was not taken.' }
  }
}
