import 'server-only'
import { notFound } from 'next/navigation'
import { NotFound } from '@/lib/domain/errors'

/** Turns "absent or not yours" into the ordinary not-found page; everything else rises. */
export async function orNotFound<T>(reading: Promise<T>): Promise<T> {
  try {
    return await reading
  } catch (error) {
    if (error instanceof NotFound) notFound()
    throw error
  }
}
