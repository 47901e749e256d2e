/** What a form shows after it was sent: done, or what to change, with everything typed still there. */
export interface FormState {
  readonly ok?: string
  readonly errors: Record<string, string[]>
  readonly message?: string
  readonly values: Record<string, string | string[]>
}

export const untouchedForm: FormState = { errors: {}, values: {} }
