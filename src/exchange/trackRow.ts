import { type Phase } from '../physics/path.ts'
import { type TrackPoint } from '../physics/track.ts'

/** One point of a track as it is answered and stored, rounded once and for all. */
export interface TrackRow {
  elapsedS: number
  /** ISO 8601 UTC */
  time: string
  latitudeDeg: number
  longitudeDeg: number
  altitudeM: number
  verticalSpeedMs: number
  windFromDeg: number
  windSpeedMs: number
  phase: Phase
}

const PHASES = ['ascent', 'burst', 'descent', 'landing'] as const satisfies readonly Phase[]

const DEGREE = Math.PI / 180

/** Units of the stored integers: ms, 1e-7°, 1e-7°, mm, mm/s, 0.01°, mm/s. */
const FIELDS = 8
const BYTES = 4 * FIELDS

/** Packs a track for storage: eight little-endian 32-bit integers a point. */
export function packTrack(points: readonly TrackPoint[]): Buffer {
  const packed = Buffer.alloc(points.length * BYTES)
  const view = new DataView(packed.buffer, packed.byteOffset, packed.length)
  let offset = 0
  for (const point of points) {
    const { windEast, windNorth } = point
    const from = (Math.atan2(-windEast, -windNorth) / DEGREE + 360) % 360
    const speed = Math.sqrt(windEast * windEast + windNorth * windNorth)
    view.setInt32(offset, Math.round(point.elapsed * 1e3), true)
    view.setInt32(offset + 4, Math.round((point.latitude / DEGREE) * 1e7), true)
    view.setInt32(offset + 8, Math.round((point.longitude / DEGREE) * 1e7), true)
    view.setInt32(offset + 12, Math.round(point.altitude * 1e3), true)
    view.setInt32(offset + 16, Math.round(point.verticalSpeed * 1e3), true)
    view.setInt32(offset + 20, Math.round(from * 100) % 36_000, true)
    view.setInt32(offset + 24, Math.round(speed * 1e3), true)
    view.setInt32(offset + 28, PHASES.indexOf(point.phase), true)
    offset += BYTES
  }
  return packed
}

/** The rows of a packed track; `launchTime` in s since 1970 UTC. */
export function unpackTrack(packed: Buffer, launchTime: number): TrackRow[] {
  return Array.from({ length: packed.length / BYTES }, (_, index) => {
    const value = (field: number) => packed.readInt32LE(index * BYTES + field * 4)
    return {
      elapsedS: value(0) / 1e3,
      time: new Date(launchTime * 1e3 + value(0)).toISOString(),
      latitudeDeg: value(1) / 1e7,
      longitudeDeg: value(2) / 1e7,
      altitudeM: value(3) / 1e3,
      verticalSpeedMs: value(4) / 1e3,
      windFromDeg: value(5) / 100,
      windSpeedMs: value(6) / 1e3,
      phase: PHASES[value(7)],
    }
  })
}
