import clsx from 'clsx'
import type { ComponentProps } from 'react'
import { controlLook } from './control-look'

export function TextArea({ className, rows = 4, ...rest }: ComponentProps<'textarea'>) {
  return <textarea {...rest} rows={rows} className={clsx(controlLook, 'py-2', className)} />
}
