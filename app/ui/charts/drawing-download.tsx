'use client'

import { useState } from 'react'
import { pngFromSvg, standaloneSvg } from './standalone-svg'

/** Saves a drawn plot as SVG or PNG. Without scripts there is nothing to press, so nothing is shown. */
export function DrawingDownload({ svgId }: { svgId: string }) {
  const [failure, setFailure] = useState<string | null>(null)

  const save = async (format: 'svg' | 'png') => {
    setFailure(null)
    try {
      const drawn = document.getElementById(svgId)
      if (!(drawn instanceof SVGSVGElement)) throw new Error(`There is no drawing called ${svgId}.`)
      const markup = await standaloneSvg(drawn)
      const blob =
        format === 'svg'
          ? new Blob([markup], { type: 'image/svg+xml' })
          : await pngFromSvg(markup, drawn.viewBox.baseVal)
      offer(blob, `${svgId}.${format}`)
    } catch (cause) {
      setFailure(
        `The ${format.toUpperCase()} could not be made here. The table and the CSV hold the same figures.`,
      )
      throw cause
    }
  }

  return (
    <>
      <noscript className="text-ink-soft">SVG and PNG need scripts.</noscript>
      {(['svg', 'png'] as const).map((format) => (
        <button
          key={format}
          type="button"
          onClick={() => void save(format)}
          aria-label={`Download the plot as ${format.toUpperCase()}`}
          className="inline-flex min-h-6 min-w-6 items-center text-verdigris underline underline-offset-[0.18em] hover:decoration-2"
        >
          {format.toUpperCase()}
        </button>
      ))}
      <span role="status" className="w-full text-madder empty:absolute">
        {failure}
      </span>
    </>
  )
}

function offer(blob: Blob, fileName: string) {
  const address = URL.createObjectURL(blob)
  const link = document.createElement('a')
  link.href = address
  link.download = fileName
  link.click()
  // The download has its own hold on the bytes once the click has been handled.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}
