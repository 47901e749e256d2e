/** Words for what kept a file from being taken, by the code with which its handler sent the person back. */
export function uploadProblem(code: string | undefined): string | undefined {
  if (code === undefined) return undefined
  return Object.hasOwn(words, code) ? words[code] : 'The file was not taken. Send it again.'
}

const words: Record<string, string> = {
  'file-missing': 'Choose a file first.',
  'file-empty': 'The file is empty. Save the workbook and choose it again.',
  'too-large':
    'The file is larger than 5 MB and was not kept. Send the results alone, without pictures or other sheets.',
  'file-too-large':
    'The file is larger than 5 MB and was not kept. Send the results alone, without pictures or other sheets.',
  'too-many-files': 'Thirty files came within an hour. Wait a little, or enter the results on screen.',
  'transfer-broken': 'The file did not arrive whole. Send it again.',
  'wrong-type': 'The file did not come by this form. Choose it below and send it.',
}
