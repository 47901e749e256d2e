import clsx from 'clsx'
import type { ComponentProps, ReactNode } from 'react'
import { controlLook } from './control-look'

type TextInputProps = ComponentProps<'input'> & {
  /** A unit at the right end of the box, such as 'N'. */
  unit?: ReactNode
  /** Numbers and codes are set in the mono face. */
  isFigure?: boolean
}

export function TextInput({ unit, isFigure = false, className, type = 'text', ...rest }: TextInputProps) {
  const input = (
    <input
      {...rest}
      type={type}
      className={clsx(controlLook, 'h-9', isFigure && 'font-mono', unit && 'pr-14', className)}
    />
  )
  if (!unit) return input
  return (
    <span className="relative block">
      {input}
      <span className="pointer-events-none absolute inset-y-0 right-2.5 flex items-center font-mono text-small text-ink-soft">
        {unit}
      </span>
    </span>
  )
}
