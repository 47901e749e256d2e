/** What a form of this page did before it led back here. */
export function doneWords(
  query: Readonly<Record<string, string | string[] | undefined>>,
): string | undefined {
  const done = [query.done].flat()[0]
  const code = [query.extended].flat()[0]
  if (done === 'closed') return 'The study is closed for returns. Next comes the scrutiny.'
  if (done === 'reopened') return 'The study is open for returns again.'
  if (code && /^[A-Z]\d\d$/.test(code)) return `Laboratory ${code} has more time, and is told so by mail.`
  return undefined
}
