import Link from 'next/link'
import type { ReactNode } from 'react'
import { Mark } from './mark'

interface TopBarProps {
  person?: { name: string; role: string } | null
  links?: readonly { name: string; href: string; isCurrent?: boolean }[]
  /** A form that ends the session; it stands after the person's name. */
  signOut?: ReactNode
  /** Where the mark leads. */
  home?: string
}

export function TopBar({ person, links = [], signOut, home = '/' }: TopBarProps) {
  return (
    <header className="border-b bg-sheet" data-screen-only>
      <div className="mx-auto flex max-w-sheet flex-wrap items-center gap-x-7 gap-y-1 px-4 py-2.5 sm:px-6 lg:px-10">
        <Link
          href={home}
          className="flex min-h-9 items-center gap-2.5 font-heading text-title font-bold tracking-tight text-ink"
        >
          <Mark />
          Evenlot
        </Link>
        {links.length > 0 && (
          <nav aria-label="Main" className="max-sm:order-3 max-sm:w-full">
            <ul className="-mx-2 flex flex-wrap gap-x-3">
              {links.map((link) => (
                <li key={link.href}>
                  <Link
                    href={link.href}
                    aria-current={link.isCurrent ? 'page' : undefined}
                    className="flex min-h-9 items-center px-2 underline-offset-4 hover:underline aria-[current]:border-b-2 aria-[current]:border-verdigris aria-[current]:font-semibold"
                  >
                    {link.name}
                  </Link>
                </li>
              ))}
            </ul>
          </nav>
        )}
        {(person || signOut) && (
          <div className="ml-auto flex flex-wrap items-center justify-end gap-x-4 text-small text-ink-soft">
            {person && (
              <span className="max-sm:sr-only">
                <span className="text-ink">{person.name}</span> · {person.role}
              </span>
            )}
            {signOut}
          </div>
        )}
      </div>
    </header>
  )
}
