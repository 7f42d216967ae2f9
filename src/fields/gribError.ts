/** What is wrong with a file that should be GRIB edition 2. */
export type GribProblem =
  /** No message where one should begin. */
  | 'not-grib'
  /** The bytes end inside a message. */
  | 'truncated'
  /** A message claims more bytes or more grid points than is ever read. */
  | 'too-large'
  /** The parts of a message contradict each other. */
  | 'damaged'
  /** Every message reads well, but together they are not air to fly in. */
  | 'incomplete'

/** A file that cannot be read as gridded air. The message says what was found. */
export class GribError extends Error {
  readonly problem: GribProblem

  constructor(problem: GribProblem, message: string) {
    super(message)
    this.name = 'GribError'
    this.problem = problem
  }
}

/** A well-formed message outside of what is read here. It is skipped and `message` tells why. */
export class UnsupportedGrib extends Error {
  constructor(reason: string) {
    super(reason)
    this.name = 'UnsupportedGrib'
  }
}

/** A `GribError` of a message whose parts contradict each other. */
export function damaged(message: string): GribError {
  return new GribError('damaged', message)
}
