/** Another site made this request in the person's name. */
export class ForeignRequest extends Error {
  constructor() {
    super('foreign request')
    this.name = 'ForeignRequest'
  }
}
