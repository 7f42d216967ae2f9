import { type Run, type Trial } from '../../service/schemas/run.ts'

/** A point of a track as the service answers it. */
export type TrackRow = NonNullable<Trial['track']>[number]

/** A run or a trial with its track, to be drawn. */
export interface ShownRun {
  /** Tells runs apart: the same key, the same flight, redrawn */
  key: string
  label: string
  run: Run | Trial
  /** From release to landing, at least these two rows */
  track: TrackRow[]
}
