import type { Metadata, Viewport } from 'next'
import { connection } from 'next/server'
import type { ReactNode } from 'react'
import { fontVariables } from './fonts'
import './globals.css'

export const metadata: Metadata = {
  title: { template: '%s · Evenlot', default: 'Evenlot' },
  description: 'Interlaboratory studies, from one even lot to a published precision statement.',
  icons: { icon: '/mark.svg' },
}

export const viewport: Viewport = {
  width: 'device-width',
  initialScale: 1,
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: '#f7f5f0' },
    { media: '(prefers-color-scheme: dark)', color: '#121918' },
  ],
}

export default async function RootLayout({ children }: { children: ReactNode }) {
  // A page made ahead of its request would carry no nonce, and its scripts would be refused.
  await connection()

  return (
    <html lang="en-GB" className={fontVariables}>
      <body>
        <a
          href="#content"
          data-screen-only
          className="sr-only bg-sheet font-semibold text-verdigris focus:not-sr-only focus:absolute focus:left-4 focus:top-4 focus:z-50 focus:px-4 focus:py-2"
        >
          Skip to the content
        </a>
        {children}
      </body>
    </html>
  )
}
