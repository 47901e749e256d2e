'use client'

import { fontVariables } from './fonts'
import './globals.css'

interface GlobalErrorProps {
  error: Error & { digest?: string }
}

/** When even the frame of the page fails. It brings its own document, and leans on nothing else of ours. */
export default function GlobalError({ error }: GlobalErrorProps) {
  return (
    <html lang="en-GB" className={fontVariables}>
      <head>
        <title>This page failed · Evenlot</title>
      </head>
      <body>
        <main className="flex flex-col items-start gap-4 p-8">
          <h1 className="font-heading text-page font-bold">This page failed, and it is our fault</h1>
          <p className="max-w-text">Load it again in a minute. Nothing that was accepted before is lost.</p>
          {error.digest && (
            <p>
              Reference <span className="font-mono font-semibold">{error.digest}</span>
            </p>
          )}
        </main>
      </body>
    </html>
  )
}
