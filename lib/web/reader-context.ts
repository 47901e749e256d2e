import 'server-only'
import type { ReaderContext } from '@/lib/reader-context'
import type { Actor } from '@/lib/domain/actor'
import { parts } from '@/lib/wiring'

/** For pages that show coded data: the connection that can name nobody. */
export function readerContext(actor: Actor | null): ReaderContext {
  return { reader: parts().readerDb, actor }
}
