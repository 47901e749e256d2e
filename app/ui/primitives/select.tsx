import clsx from 'clsx'
import type { ComponentProps } from 'react'
import { controlLook } from './control-look'

type SelectProps = ComponentProps<'select'> & {
  options: readonly { value: string; label: string; isDisabled?: boolean }[]
  /** A first, empty choice such as 'Choose a level'. */
  placeholder?: string
}

export function Select({ options, placeholder, className, ...rest }: SelectProps) {
  return (
    <select {...rest} className={clsx(controlLook, 'h-9', className)}>
      {placeholder !== undefined && <option value="">{placeholder}</option>}
      {options.map((option) => (
        <option key={option.value} value={option.value} disabled={option.isDisabled}>
          {option.label}
        </option>
      ))}
    </select>
  )
}
