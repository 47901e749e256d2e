import { Button } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import type { SheetContent } from './send-draft'

interface DraftDifferenceProps {
  mine: SheetContent
  other: SheetContent
  /** Names the place at a position. */
  nameOf: (position: number) => string
  onKeepMine: () => void
  onTakeOther: () => void
}

const mostShown = 12

/** Two drafts of one sheet, where they differ, and the choice between them. Neither is lost before it is made. */
export function DraftDifference({ mine, other, nameOf, onKeepMine, onTakeOther }: DraftDifferenceProps) {
  const different = mine.entries.flatMap((text, position) =>
    text === (other.entries[position] ?? '') ? [] : [position],
  )
  return (
    <Notice tone="warn" title="The draft was changed on another page, by you or a colleague" isLive>
      {different.length > 0 && (
        <table className="my-2 border-collapse text-small">
          <caption className="pb-1 text-left">Where the two differ</caption>
          <thead>
            <tr>
              <th scope="col" className="pr-5 text-left">
                Place
              </th>
              <th scope="col" className="pr-5 text-left">
                Here
              </th>
              <th scope="col" className="text-left">
                Elsewhere
              </th>
            </tr>
          </thead>
          <tbody>
            {different.slice(0, mostShown).map((position) => (
              <tr key={position}>
                <th scope="row" className="pr-5 text-left font-normal">
                  {nameOf(position)}
                </th>
                <td className="pr-5 font-mono">{mine.entries[position] || 'empty'}</td>
                <td className="font-mono">{other.entries[position] || 'empty'}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      {different.length > mostShown && <p>And {different.length - mostShown} more.</p>}
      {mine.remark !== other.remark && (
        <p>The remark differs too. Elsewhere it reads: “{other.remark || 'nothing'}”</p>
      )}
      <p className="mt-2 flex flex-wrap gap-2">
        <Button onClick={onKeepMine}>Keep what stands here</Button>
        <Button onClick={onTakeOther}>Take what stands elsewhere</Button>
      </p>
    </Notice>
  )
}
