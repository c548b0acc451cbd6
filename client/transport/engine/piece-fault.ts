/** What loading sound can end in, besides sound: no line (comes back), or never. */
export class PieceFault extends Error {
  readonly canRetry: boolean
  constructor(message: string, canRetry: boolean) {
    super(message)
    this.canRetry = canRetry
  }
}
