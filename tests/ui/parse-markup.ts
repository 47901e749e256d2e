import { JSDOM } from 'jsdom'

export function parseMarkup(markup: string): Document {
  return new JSDOM(`<!doctype html><body>${markup}`).window.document
}
