import { type Position } from './earth.ts'

/** Where the flight train is, while it flies. Mutable: one per flight, moved along by ascent and descent. */
export interface Whereabouts extends Position {
  /** Geometric m above mean sea level */
  altitude: number
  /** Seconds since release */
  elapsed: number
}

export type Phase = 'ascent' | 'burst' | 'descent' | 'landing'

/** Somebody who wants the flight's path and not just its ends. */
export interface PathRecorder {
  /** Called at release and after every step; `verticalSpeed` in m/s, upwards positive. */
  record(at: Whereabouts, verticalSpeed: number, phase: Phase): void
}

/** How far, m, a recorded path may bend away from the straight line between two recorded steps. */
const RECORDED_BEND = 20

/**
 * Height, m, that a recorded flight may step through at a vertical `speed` in m/s where the wind ranges
 * over `windRange` m/s: such a velocity bends a path of duration t from its chord by at most r·t/4.
 */
export function recordedStep(windRange: number, speed: number): number {
  return (4 * RECORDED_BEND * speed) / windRange
}
