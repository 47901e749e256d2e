import { DownloadLink } from '../primitives/download-link'

/** What a signed-in reader recomputes a measurand from: the coded results, and the analysis to hold beside. */
export function CodedDownloads({ studyId, measurandId }: { studyId: string; measurandId: string }) {
  const coded = `/api/studies/${studyId}/coded/${measurandId}`
  return (
    <>
      <DownloadLink href={`${coded}.csv`} format="CSV">
        Coded results
      </DownloadLink>
      <DownloadLink href={`${coded}.json`} format="JSON">
        The analysis
      </DownloadLink>
    </>
  )
}
