import { TopBar } from '@/app/ui/layout/top-bar'
import { paths } from '@/lib/web/paths'

/** The bar above what everyone may read. It asks nobody who they are, so that these pages differ for no one. */
export function PublicTopBar({ current }: { current?: 'published' }) {
  return (
    <TopBar
      links={[
        { name: 'Published', href: paths.published(), isCurrent: current === 'published' },
        { name: 'Sign in', href: paths.signIn() },
      ]}
    />
  )
}
