import { type Place } from './profile.ts'

/** One thing wrong with the bytes of a sounding. */
export interface SoundingProblem {
  /** JSON pointer, for a sounding in JSON */
  path?: string
  /** Line from 1, for a sounding in text */
  line?: number
  message: string
}

/** Problems told at once; a file with more of them has one thing wrong all over. */
export const MOST_PROBLEMS = 20

/** Bytes that hold no sounding to fly in. */
export class BadSounding extends Error {
  readonly problems: readonly SoundingProblem[]
  /** True where the bytes could not be read; false where they were, and cannot be flown in. */
  readonly unparseable: boolean

  constructor(kind: 'unparseable' | 'not-flyable', problems: readonly SoundingProblem[]) {
    super(problems.map(describe).join('; '))
    this.name = 'BadSounding'
    this.problems = problems
    this.unparseable = kind === 'unparseable'
  }
}

/** A problem at a place; `member` is the JSON member of the value that is wrong. */
export function problemAt(place: Place, message: string, member?: string): SoundingProblem {
  if ('line' in place) return { line: place.line, message }
  if ('path' in place) {
    return { path: member === undefined ? place.path : `${place.path}/${member}`, message }
  }
  return { message: `${place.label}: ${message}` }
}

function describe({ path, line, message }: SoundingProblem): string {
  if (line !== undefined) return `line ${line}: ${message}`
  return path === undefined || path === '' ? message : `${path}: ${message}`
}
