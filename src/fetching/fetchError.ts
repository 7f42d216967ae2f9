/**
 * What may help after a failure: asking the same again, beginning with the file anew (it changed, or came
 * damaged), or nothing for now.
 */
export type Remedy = 'again' | 'anew' | 'none'

/** Why a fetch, or a part of it, failed. */
export class FetchError extends Error {
  readonly remedy: Remedy

  constructor(message: string, remedy: Remedy, cause?: unknown) {
    super(message, { cause })
    this.name = 'FetchError'
    this.remedy = remedy
  }
}
