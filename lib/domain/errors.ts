/** A rule of the product says no; the words are made for the person who asked. */
export class Refusal extends Error {
  constructor(
    readonly code: string,
    readonly publicMessage: string,
    readonly field?: string,
  ) {
    super(`${code}: ${publicMessage}`)
    this.name = 'Refusal'
  }
}

/** Absent, or out of the asker's sight: from outside the two look the same. */
export class NotFound extends Error {
  constructor(readonly what: string) {
    super(`not found: ${what}`)
    this.name = 'NotFound'
  }
}

/** The request needs a signed-in person and has none. */
export class SignInNeeded extends Error {
  constructor() {
    super('sign-in needed')
    this.name = 'SignInNeeded'
  }
}
