import { emptyAirState, type Air } from './air.ts'
import { wrapLongitude } from './earth.ts'
import { type PathRecorder, type Phase, type Whereabouts } from './path.ts'

/** Mean radius of the earth, m (GRS 80, Moritz 2000): good enough to measure how far a path bends. */
const EARTH_RADIUS = 6_371_009

/**
 * How far, m, the kept points may stand off the recorded path at any moment. With what the recorded path
 * itself may bend between two steps this keeps a track within 50 m of the flight.
 */
const TOLERANCE = 28

/** A point of a flown track. SI; angles in radians, longitude in [-π, π). */
export interface TrackPoint extends Whereabouts {
  /** m/s, upwards positive */
  verticalSpeed: number
  windEast: number
  windNorth: number
  phase: Phase
}

interface RecordedPoint extends Whereabouts {
  verticalSpeed: number
  phase: Phase
}

/** Records a flight's path and keeps as few of its points as tell it to within 50 m at every moment. */
export class TrackRecorder implements PathRecorder {
  private readonly points: RecordedPoint[] = []

  record(at: Whereabouts, verticalSpeed: number, phase: Phase): void {
    const { latitude, longitude, altitude, elapsed } = at
    this.points.push({ latitude, longitude, altitude, elapsed, verticalSpeed, phase })
  }

  /** The track with the wind of the air it was flown in; `releaseTime` in s since 1970 UTC. */
  track(air: Air, releaseTime: number): TrackPoint[] {
    const state = emptyAirState()
    return this.keptPoints().map((point) => {
      const { latitude, longitude, altitude, elapsed, verticalSpeed, phase } = point
      air.sample(latitude, longitude, altitude, releaseTime + elapsed, state)
      return {
        latitude,
        longitude: wrapLongitude(longitude),
        altitude,
        elapsed,
        verticalSpeed,
        windEast: state.windEast,
        windNorth: state.windNorth,
        phase,
      }
    })
  }

  /** Douglas and Peucker, Cartographica 10, 1973, p. 112, with distances taken at equal times. */
  private keptPoints(): RecordedPoint[] {
    const { points } = this
    const kept = new Uint8Array(points.length)
    const open: [number, number][] = []
    let start = 0
    points.forEach((point, index) => {
      if (index === 0 || point.phase === 'burst' || point.phase === 'landing') {
        kept[index] = 1
        if (index > start) open.push([start, index])
        start = index
      }
    })
    for (let span = open.pop(); span; span = open.pop()) {
      const [first, last] = span
      let farthest = TOLERANCE
      let split = -1
      for (let index = first + 1; index < last; index++) {
        const distance = bend(points[first], points[index], points[last])
        if (distance > farthest) {
          farthest = distance
          split = index
        }
      }
      if (split > 0) {
        kept[split] = 1
        open.push([first, split], [split, last])
      }
    }
    return points.filter((_, index) => kept[index] === 1)
  }
}

/** Distance, m, of `point` from where the straight line from `first` to `last` is at its time. */
function bend(first: Whereabouts, point: Whereabouts, last: Whereabouts): number {
  const share = (point.elapsed - first.elapsed) / (last.elapsed - first.elapsed)
  const north = off(first.latitude, point.latitude, last.latitude, share) * EARTH_RADIUS
  const east =
    off(first.longitude, point.longitude, last.longitude, share) *
    EARTH_RADIUS *
    Math.cos(first.latitude)
  const up = off(first.altitude, point.altitude, last.altitude, share)
  return Math.sqrt(north * north + east * east + up * up)
}

function off(first: number, value: number, last: number, share: number): number {
  return value - (first + (last - first) * share)
}
