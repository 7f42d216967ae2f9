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

/** Values of a recorded point, in the order in which they are kept. */
const LATITUDE = 0
const LONGITUDE = 1
const ALTITUDE = 2
const ELAPSED = 3
const VERTICAL_SPEED = 4
const WIND_EAST = 5
const WIND_NORTH = 6
const VALUES = 7

/** Records a flight's path and keeps as few of its points as tell it to within 50 m at every moment. */
export class TrackRecorder implements PathRecorder {
  private points = new Float64Array(512 * VALUES)
  private readonly phases: Phase[] = []

  record(
    at: Whereabouts,
    verticalSpeed: number,
    windEast: number,
    windNorth: number,
    phase: Phase,
  ): void {
    const offset = this.phases.length * VALUES
    if (offset === this.points.length) {
      const longer = new Float64Array(2 * offset)
      longer.set(this.points)
      this.points = longer
    }
    const { points } = this
    points[offset + LATITUDE] = at.latitude
    points[offset + LONGITUDE] = at.longitude
    points[offset + ALTITUDE] = at.altitude
    points[offset + ELAPSED] = at.elapsed
    points[offset + VERTICAL_SPEED] = verticalSpeed
    points[offset + WIND_EAST] = windEast
    points[offset + WIND_NORTH] = windNorth
    this.phases.push(phase)
  }

  /** The track so far. */
  track(): TrackPoint[] {
    const { points, phases } = this
    const track: TrackPoint[] = []
    const kept = this.kept()
    for (let index = 0; index < phases.length; index++) {
      if (kept[index] === 0) continue
      const at = index * VALUES
      track.push({
        latitude: points[at + LATITUDE],
        longitude: wrapLongitude(points[at + LONGITUDE]),
        altitude: points[at + ALTITUDE],
        elapsed: points[at + ELAPSED],
        verticalSpeed: points[at + VERTICAL_SPEED],
        windEast: points[at + WIND_EAST],
        windNorth: points[at + WIND_NORTH],
        phase: phases[index],
      })
    }
    return track
  }

  /**
   * Which points tell the path: 1 for each that stays. Douglas and Peucker, Cartographica 10, 1973,
   * p. 112, with distances taken at equal times.
   */
  private kept(): Uint8Array {
    const { phases } = this
    const kept = new Uint8Array(phases.length)
    const open: number[] = []
    let start = 0
    for (let index = 0; index < phases.length; index++) {
      if (index > 0 && phases[index] !== 'burst' && phases[index] !== 'landing') continue
      kept[index] = 1
      if (index > start) open.push(start, index)
      start = index
    }
    for (let last = open.pop(); last !== undefined; last = open.pop()) {
      const first = open.pop() ?? 0
      const split = this.farthest(first, last)
      if (split === 0) continue
      kept[split] = 1
      open.push(first, split, split, last)
    }
    return kept
  }

  /**
   * The point between two that is farthest from where the straight line between them is at its time; 0
   * where none is farther off than the tolerance.
   */
  private farthest(first: number, last: number): number {
    const { points } = this
    const from = first * VALUES
    const to = last * VALUES
    const latitude = points[from + LATITUDE]
    const longitude = points[from + LONGITUDE]
    const altitude = points[from + ALTITUDE]
    const elapsed = points[from + ELAPSED]
    const perSecond = 1 / (points[to + ELAPSED] - elapsed)
    const latitudeRate = (points[to + LATITUDE] - latitude) * perSecond
    const longitudeRate = (points[to + LONGITUDE] - longitude) * perSecond
    const altitudeRate = (points[to + ALTITUDE] - altitude) * perSecond
    const eastward = EARTH_RADIUS * Math.cos(latitude)
    let farthest = TOLERANCE * TOLERANCE
    let found = 0
    for (let at = from + VALUES; at < to; at += VALUES) {
      const wait = points[at + ELAPSED] - elapsed
      const north = (points[at + LATITUDE] - latitude - latitudeRate * wait) * EARTH_RADIUS
      const east = (points[at + LONGITUDE] - longitude - longitudeRate * wait) * eastward
      const up = points[at + ALTITUDE] - altitude - altitudeRate * wait
      const square = north * north + east * east + up * up
      if (square > farthest) {
        farthest = square
        found = at / VALUES
      }
    }
    return found
  }
}
