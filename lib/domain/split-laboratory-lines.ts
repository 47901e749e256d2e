/** One pasted line as its six parts, as typed. */
export interface LaboratoryLine {
  /** Counted from one, empty lines included, as an editor counts. */
  readonly line: number
  readonly laboratory: string
  readonly city: string
  readonly country: string
  readonly contactName: string
  readonly address: string
  readonly zone: string
  /** How many parts the line really had. */
  readonly parts: number
}

/** Lines such as "Laboratory; town; country; contact; address; zone", or the same pasted from a sheet with tabs. */
export function splitLaboratoryLines(text: string): LaboratoryLine[] {
  return text.split(/\r\n|\r|\n/).flatMap((content, index) => {
    if (!content.trim()) return []
    const parts = content.split(content.includes('\t') ? '\t' : ';').map((part) => part.trim())
    const [laboratory = '', city = '', country = '', contactName = '', address = '', zone = ''] = parts
    return [{ line: index + 1, laboratory, city, country, contactName, address, zone, parts: parts.length }]
  })
}
