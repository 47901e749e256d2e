import type { Transaction } from 'kysely'
import { listIdentifyingWords } from '@/db/queries/laboratories'
import type { DB } from '@/db/tables'
import { Refusal } from '@/lib/domain/errors'
import { findIdentifyingWord } from '@/lib/domain/identifying-words'

/** Keeps a text that others will read from naming a laboratory of the study. @throws {Refusal} `names-a-laboratory` */
export async function refuseIdentifyingWords(
  trx: Transaction<DB>,
  { studyId, texts }: { studyId: string; texts: readonly { field: string; text: string }[] },
): Promise<void> {
  const words = await listIdentifyingWords(trx, studyId)
  for (const { field, text } of texts) {
    const word = findIdentifyingWord(text, words)
    if (word)
      throw new Refusal(
        'names-a-laboratory',
        `“${word}” could tell which laboratory this is about. Write of laboratories by their codes alone.`,
        field,
      )
  }
}
