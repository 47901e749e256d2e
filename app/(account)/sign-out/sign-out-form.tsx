import { Button } from '@/app/ui/primitives/button'
import { paths } from '@/lib/web/paths'

/** Stands in the top bar of whoever is signed in. A plain form, so that it ends the session without scripts too. */
export function SignOutForm() {
  return (
    <form method="post" action={paths.signOut()}>
      <Button type="submit">Sign out</Button>
    </form>
  )
}
