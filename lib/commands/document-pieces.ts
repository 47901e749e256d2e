/** Of a longer list this many items come in one piece: some tens of kilobytes, which are soon forgotten again. */
const TOGETHER = 32

/**
 * The JSON text of a document in pieces, together the same as `JSON.stringify(document, null, 2)` and a line feed, so that
 * the text of a large study need not be held as a whole.
 */
export function* documentPieces(document: object): Generator<string> {
  yield* objectPieces(document, 0)
  yield '\n'
}

function* objectPieces(value: object, depth: number): Generator<string> {
  const entries = Object.entries(value).filter(([, inner]) => inner !== undefined)
  if (entries.length === 0) return yield '{}'
  for (const [place, [key, inner]] of entries.entries()) {
    yield `${place === 0 ? '{' : ','}${lineFeed(depth + 1)}${JSON.stringify(key)}: `
    if (isLongList(inner) || isLarge(inner)) yield* pieces(inner as object, depth + 1)
    else yield textsAt([inner], depth)
  }
  yield `${lineFeed(depth)}}`
}

function* pieces(value: object, depth: number): Generator<string> {
  yield* Array.isArray(value) ? listPieces(value, depth) : objectPieces(value, depth)
}

function* listPieces(items: readonly unknown[], depth: number): Generator<string> {
  let waiting: unknown[] = []
  let isFirst = true
  const opening = (): string => {
    const mark = isFirst ? '[' : ','
    isFirst = false
    return `${mark}${lineFeed(depth + 1)}`
  }
  for (const item of items) {
    const isInParts = isLarge(item)
    if (waiting.length === TOGETHER || (isInParts && waiting.length > 0)) {
      yield `${opening()}${textsAt(waiting, depth)}`
      waiting = []
    }
    if (isInParts) {
      yield opening()
      yield* pieces(item as object, depth + 1)
    } else waiting.push(item)
  }
  if (waiting.length > 0) yield `${opening()}${textsAt(waiting, depth)}`
  yield `${lineFeed(depth)}]`
}

/** Whether it holds, somewhere inside, a list that is better not written at once. */
function isLarge(value: unknown): boolean {
  if (value === null || typeof value !== 'object') return false
  return Object.values(value).some((inner) => isLongList(inner) || isLarge(inner))
}

function isLongList(value: unknown): boolean {
  return Array.isArray(value) && value.length > TOGETHER
}

/** Items of a list that stands at this depth, as they are written there: as of a list in as many lists. */
function textsAt(items: readonly unknown[], depth: number): string {
  let nested: unknown = items
  let around = 0
  for (let level = 0; level <= depth; level += 1) {
    // An opening bracket, a line feed and two blanks for each level.
    around += 2 + 2 * (level + 1)
    if (level < depth) nested = [nested]
  }
  const text = JSON.stringify(nested, null, 2)
  // The closing ones are as long, each but for the two blanks that it stands further out.
  return text.slice(around, text.length - (around - 2 * (depth + 1)))
}

function lineFeed(depth: number): string {
  return `\n${'  '.repeat(depth)}`
}
