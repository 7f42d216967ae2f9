const DEGREE = Math.PI / 180

/** A place on the map: longitude and latitude as the map library takes them, degrees. */
export type MapPlace = [number, number]

/**
 * How places on earth lie on the map. Mercator's map ends at 85°, and its scale runs away long before:
 * a flight near a pole is drawn with the globe turned so that the flight lies where the equator was.
 */
export interface MapFrame {
  /** Two frames with the same key are the same */
  key: string
  /** The place on earth, [longitude, latitude] in degrees, turned to 0, 0; null where nothing is turned */
  turnedTo: [number, number] | null
  toMap: (latitudeDeg: number, longitudeDeg: number) => MapPlace
  /** [longitude in [-180, 180), latitude] */
  toEarth: (place: MapPlace) => [number, number]
}

/** From this latitude on the globe is turned: Mercator's scale there is six times the equator's. */
const POLAR = 80

/** The frame for flights of which these are places; the first place is the one nearest to the reader. */
export function frameFor(
  places: readonly { latitudeDeg: number; longitudeDeg: number }[],
): MapFrame {
  const [{ latitudeDeg, longitudeDeg }] = places
  const polar = places.some((place) => Math.abs(place.latitudeDeg) > POLAR)
  return polar
    ? turnedFrame(Math.round(longitudeDeg), Math.round(latitudeDeg))
    : uprightFrame(Math.round(longitudeDeg / 10) * 10)
}

/** North up everywhere; longitudes run on past 180° from the middle, so that no flight is cut there. */
function uprightFrame(middle: number): MapFrame {
  return {
    key: `upright ${middle}`,
    turnedTo: null,
    toMap: (latitudeDeg, longitudeDeg) => [middle + wrapped(longitudeDeg - middle), latitudeDeg],
    toEarth: ([longitude, latitude]) => [wrapped(longitude), latitude],
  }
}

/** The globe turned about its axis by -λ, then tilted by φ. */
function turnedFrame(longitude: number, latitude: number): MapFrame {
  const tilt = latitude * DEGREE
  return {
    key: `turned ${longitude} ${latitude}`,
    turnedTo: [longitude, latitude],
    toMap: (latitudeDeg, longitudeDeg) => tilted(latitudeDeg, longitudeDeg - longitude, tilt),
    toEarth: ([x, y]) => {
      const [east, north] = tilted(y, x, -tilt)
      return [wrapped(east + longitude), north]
    },
  }
}

/** Longitude and latitude of a place after the globe is turned by `tilt` about the axis through 90° E. */
function tilted(latitudeDeg: number, longitudeDeg: number, tilt: number): MapPlace {
  const [phi, lambda] = [latitudeDeg * DEGREE, longitudeDeg * DEGREE]
  const x = Math.cos(phi) * Math.cos(lambda)
  const y = Math.cos(phi) * Math.sin(lambda)
  const z = Math.sin(phi)
  const [c, s] = [Math.cos(tilt), Math.sin(tilt)]
  const [turnedX, turnedZ] = [x * c + z * s, z * c - x * s]
  return [Math.atan2(y, turnedX) / DEGREE, Math.atan2(turnedZ, Math.hypot(turnedX, y)) / DEGREE]
}

/** A longitude in [-180, 180), degrees. */
export function wrapped(longitude: number): number {
  return ((((longitude + 180) % 360) + 360) % 360) - 180
}

/** Great-circle distance between two places [longitude, latitude], m, on the sphere of mean radius. */
export function sphereDistance(a: MapPlace, b: MapPlace): number {
  const [phi1, phi2] = [a[1] * DEGREE, b[1] * DEGREE]
  const halfNorth = Math.sin((phi2 - phi1) / 2) ** 2
  const halfEast = Math.sin(((b[0] - a[0]) * DEGREE) / 2) ** 2
  // Haversine formula; mean earth radius of GRS 80 (Moritz 2000).
  return (
    2 * 6_371_009 * Math.asin(Math.sqrt(halfNorth + Math.cos(phi1) * Math.cos(phi2) * halfEast))
  )
}
