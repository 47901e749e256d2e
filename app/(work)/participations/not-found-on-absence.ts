import { notFound } from 'next/navigation'
import { NotFound } from '@/lib/domain/errors'

/** For pages: what is absent or another laboratory's is answered by the ordinary page for both. */
export async function notFoundOnAbsence<T>(reading: Promise<T>): Promise<T> {
  try {
    return await reading
  } catch (error) {
    if (error instanceof NotFound) notFound()
    throw error
  }
}
