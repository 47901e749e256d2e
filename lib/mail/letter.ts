/** What a mail says, before it is laid out: the same words make its plain text and its HTML. */
export interface Letter {
  /** The study's short name, or the product's. */
  readonly about: string
  readonly subject: string
  readonly paragraphs: readonly string[]
  readonly button?: { readonly label: string; readonly url: string }
  readonly closing: readonly string[]
}

export interface LaidOutMail {
  readonly subject: string
  readonly text: string
  readonly html: string
}

export function layOutLetter(letter: Letter): LaidOutMail {
  const { button } = letter
  const paragraphs = letter.paragraphs.map(oneLine)
  const closing = letter.closing.map(oneLine)
  const link = button ? [`${button.label}:\n${button.url}`] : []
  return {
    subject: oneLine(`${letter.about}: ${letter.subject}`).slice(0, 150),
    text: `${[...paragraphs, ...link].join('\n\n')}\n\n-- \n${closing.join('\n\n')}\n`,
    html: [
      '<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Mail</title></head>',
      '<body style="margin:0;padding:24px;background:#ffffff;color:#1b2528;font:16px/1.5 sans-serif">',
      '<div style="max-width:34em">',
      ...paragraphs.map((words) => `<p>${escapeHtml(words)}</p>`),
      ...(button ? [buttonHtml(button)] : []),
      '<hr style="border:0;border-top:1px solid #dad6cb;margin:24px 0">',
      ...closing.map((words) => `<p style="color:#55625f;font-size:14px">${escapeHtml(words)}</p>`),
      '</div></body></html>',
    ].join('\n'),
  }
}

/**
 * A text from a person as part of one line: line ends could begin a header or a paragraph of their own, and
 * direction marks could turn what follows round.
 */
export function oneLine(text: string): string {
  return text
    .replace(/[\u202a-\u202e\u2066-\u2069\u200e\u200f]/g, '')
    .replace(/[\s\u0000-\u001f\u007f-\u009f\u2028\u2029]+/g, ' ')
    .trim()
}

function buttonHtml({ label, url }: { label: string; url: string }): string {
  const style =
    'display:inline-block;padding:10px 16px;background:#0e5e5c;color:#ffffff;text-decoration:none;border-radius:2px'
  return `<p><a href="${escapeHtml(url)}" style="${style}">${escapeHtml(label)}</a></p>\n<p style="font-size:14px">${escapeHtml(label)}:<br>${escapeHtml(url)}</p>`
}

const entities: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
}

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => entities[character] ?? '')
}
