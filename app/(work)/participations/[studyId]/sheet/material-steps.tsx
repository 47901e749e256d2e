import { useRef, type ReactNode } from 'react'
import { Button } from '@/app/ui/primitives/button'
import type { MaterialGroup } from './material-rows'

interface MaterialStepsProps {
  groups: readonly MaterialGroup[]
  shown: number
  isLive: boolean
  onShow: (index: number) => void
  children: ReactNode
}

/** On a narrow screen: which material is being filled in, and the way to the next. Wide screens show all at once. */
export function MaterialSteps({ groups, shown, isLive, onShow, children }: MaterialStepsProps) {
  const heading = useRef<HTMLHeadingElement>(null)
  const isLast = shown === groups.length - 1

  function go(index: number): void {
    onShow(index)
    heading.current?.focus()
  }

  return (
    <div>
      {isLive && (
        <h2 ref={heading} tabIndex={-1} className="mb-2.5 font-heading text-title font-bold sm:hidden">
          {groups[shown]?.name}
          <span className="block font-sans text-small font-normal text-ink-soft">
            Material {shown + 1} of {groups.length}
          </span>
        </h2>
      )}
      {children}
      {isLive && groups.length > 1 && (
        <div className="flex gap-2.5 sm:hidden">
          {shown > 0 && (
            <Button className="min-h-11 flex-1" onClick={() => go(shown - 1)}>
              Back
            </Button>
          )}
          {!isLast && (
            <Button variant="primary" className="min-h-11 flex-[2]" onClick={() => go(shown + 1)}>
              Keep and go on
            </Button>
          )}
        </div>
      )}
    </div>
  )
}
