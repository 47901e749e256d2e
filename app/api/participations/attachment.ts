/** A file to be saved, under a name that any browser can read (RFC 6266, with RFC 8187 for what is not ASCII). */
export function attachment({
  fileName,
  bytes,
  type,
}: {
  fileName: string
  bytes: Uint8Array
  type: string
}): Response {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\%]/g, '_')
  const encoded = encodeURIComponent(Buffer.from(fileName).toString()).replace(
    /['()*]/g,
    (sign) => `%${sign.charCodeAt(0).toString(16).toUpperCase()}`,
  )
  return new Response(new Uint8Array(bytes), {
    headers: {
      'Content-Type': type,
      'Content-Length': String(bytes.byteLength),
      'Content-Disposition': `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`,
    },
  })
}
