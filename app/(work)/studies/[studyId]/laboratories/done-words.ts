/** What a form of this page did before it led back here. */
export function doneWords(done: string | string[] | undefined, invited: number): string | undefined {
  if (done === 'sent') return `${invited} invitations are on their way. The study is open for returns.`
  if (done === 'corrected') return 'The contact is corrected. Nothing is sent yet.'
  if (done === 'corrected-sent')
    return 'The contact is corrected and a new link is on its way; the earlier one no longer works.'
  return undefined
}
