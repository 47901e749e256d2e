import type { ReactNode } from 'react'

interface DownloadLinkProps {
  href: string
  children: ReactNode
  /** 'CSV', 'PDF'; the size too where it is known, such as 'PDF, 240 kB'. */
  format?: string
  /** The name to save under, if the server does not give one. */
  fileName?: string
}

/** An ordinary anchor and not a framework link, since the answer is a file and not a page. */
export function DownloadLink({ href, children, format, fileName }: DownloadLinkProps) {
  return (
    <a
      href={href}
      download={fileName ?? true}
      data-screen-only
      className="inline-flex min-h-6 items-center gap-1.5 text-verdigris"
    >
      <svg width="11" height="12" viewBox="0 0 11 12" aria-hidden="true">
        <path
          d="M5.5 0.5V8M2.3 5L5.5 8.2L8.7 5M0.5 11.2H10.5"
          fill="none"
          stroke="currentColor"
          strokeWidth="1.4"
        />
      </svg>
      <span className="underline underline-offset-[0.18em] hover:decoration-2">{children}</span>
      {format && <span className="text-small text-ink-soft">({format})</span>}
    </a>
  )
}
