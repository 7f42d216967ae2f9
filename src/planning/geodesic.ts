import geographic from 'geographiclib-geodesic'
import { type Position } from '../physics/earth.ts'

const DEGREE = Math.PI / 180
const { Geodesic } = geographic

/** The geodesic between two places on the WGS 84 ellipsoid. */
export interface GeodesicLine {
  /** m */
  distance: number
  /** Direction at the start, clockwise from north, radians in [0, 2π); 0 where there is no distance */
  bearing: number
}

/** Distance and bearing from one place to another (Karney, J. Geodesy 87, 2013, p. 43). */
export function geodesicLine(from: Position, to: Position): GeodesicLine {
  const { s12 = 0, azi1 = 0 } = Geodesic.WGS84.Inverse(
    from.latitude / DEGREE,
    from.longitude / DEGREE,
    to.latitude / DEGREE,
    to.longitude / DEGREE,
    Geodesic.DISTANCE | Geodesic.AZIMUTH,
  )
  if (s12 === 0) return { distance: 0, bearing: 0 }
  return { distance: s12, bearing: ((azi1 + 360) % 360) * DEGREE }
}
