/** Names that a level of the nesting must not take: they stand for the outermost and the innermost, or for other rooms of the file. */
const RESERVED = ['laboratory', 'lab', 'replicate', 'residual', 'material', 'value', 'result', 'measurand']

/** In any letter case. */
export function isReservedLevel(name: string): boolean {
  return RESERVED.includes(name.toLowerCase())
}
