/** Static markup as a document to be asked. The test must run in vitest's jsdom environment. */
export function parseMarkup(markup: string): Document {
  return new DOMParser().parseFromString(`<!doctype html><body>${markup}`, 'text/html')
}
