import type { MeasurandReview, ReviewView } from '@/lib/use-cases/reviews/read-review'

/** The measurand that an address asks for, or the first. */
export function chooseMeasurand(
  review: ReviewView,
  asked: string | string[] | undefined,
): MeasurandReview | undefined {
  const measurands = review.analysis?.measurands ?? []
  return measurands.find(({ measurandId }) => measurandId === asked) ?? measurands[0]
}
