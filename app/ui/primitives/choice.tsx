import type { ComponentProps, ReactNode } from 'react'

type ChoiceProps = Omit<ComponentProps<'input'>, 'type' | 'id'> & {
  kind: 'radio' | 'checkbox'
  id: string
  label: ReactNode
  hint?: ReactNode
}

/** One box or button with its words; the whole line can be pressed. */
export function Choice({ kind, id, label, hint, ...rest }: ChoiceProps) {
  const described = [rest['aria-describedby'], hint ? `${id}-hint` : ''].filter(Boolean).join(' ')
  return (
    <div className="flex items-start gap-2.5">
      <input
        {...rest}
        id={id}
        type={kind}
        aria-describedby={described || undefined}
        className="m-0.5 size-5 shrink-0"
      />
      <div>
        <label htmlFor={id} className="block min-h-6">
          {label}
        </label>
        {hint && (
          <p id={`${id}-hint`} className="max-w-text text-small text-ink-soft">
            {hint}
          </p>
        )}
      </div>
    </div>
  )
}
