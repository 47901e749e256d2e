import { TopBar } from '@/app/ui/layout/top-bar'
import type { Actor } from '@/lib/domain/actor'
import { paths } from '@/lib/web/paths'

interface WorkTopBarProps {
  actor: Actor
  current?: 'studies' | 'published'
}

/** The bar above every page of a signed-in person. */
export function WorkTopBar({ actor, current }: WorkTopBarProps) {
  return (
    <TopBar
      home={paths.studies()}
      person={{ name: actor.name, role: roleWords(actor) }}
      links={[
        { name: 'Studies', href: paths.studies(), isCurrent: current === 'studies' },
        { name: 'Published', href: paths.published(), isCurrent: current === 'published' },
      ]}
      signOut={
        <form method="post" action={paths.signOut()}>
          <button
            type="submit"
            className="min-h-6 text-verdigris underline underline-offset-[0.18em] hover:decoration-2"
          >
            Sign out
          </button>
        </form>
      }
    />
  )
}

function roleWords({ organisations, committees, laboratories }: Actor): string {
  if (organisations.some(({ role }) => role === 'administrator')) return 'administrator'
  if (organisations.length > 0) return 'coordinator'
  if (committees.length > 0) return 'committee'
  return laboratories.length > 0 ? 'for a laboratory' : 'no study yet'
}
