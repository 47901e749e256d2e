import { Refusal } from './errors'

export const studyStates = ['draft', 'open', 'closed', 'in-review', 'published'] as const
export type StudyState = (typeof studyStates)[number]

/** From where a study may go where. Nothing leads out of "published". */
const steps: Record<StudyState, readonly StudyState[]> = {
  draft: ['open'],
  open: ['closed'],
  closed: ['open', 'in-review'],
  'in-review': ['closed', 'published'],
  published: [],
}

const words: Record<StudyState, string> = {
  draft: 'is still a draft',
  open: 'is open for returns',
  closed: 'is closed for returns',
  'in-review': 'is before its committee',
  published: 'is published',
}

export function describeState(state: StudyState): string {
  return words[state]
}

/** The same standing alone, as in a list: "open for returns". */
export function stateWords(state: StudyState): string {
  return words[state].replace(/^is (still )?/, '')
}

/** @throws {Refusal} `wrong-state` when the course of a study has no such step. */
export function requireStep(from: StudyState, to: StudyState): void {
  if (!steps[from].includes(to))
    throw new Refusal('wrong-state', `The study ${words[from]}; this step is not open from there.`)
}

/** @throws {Refusal} `wrong-state` unless the study is in one of the states named. */
export function requireState(state: StudyState, ...allowed: readonly StudyState[]): void {
  if (!allowed.includes(state))
    throw new Refusal('wrong-state', `The study ${words[state]}, so this cannot be changed now.`)
}
