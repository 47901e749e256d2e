/** A download: always an attachment, never rendered in our origin. @param fileName ASCII, made by us */
export function fileReply({
  body,
  type,
  fileName,
}: {
  body: string
  type: string
  fileName: string
}): Response {
  return new Response(body, {
    headers: {
      'content-type': type,
      'content-disposition': `attachment; filename="${fileName.replace(/[^\w.-]+/g, '-')}"`,
    },
  })
}
