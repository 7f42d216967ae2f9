const DEGREE = Math.PI / 180

/** Pairs of latitude and longitude, radians, as the JSON of GeoJSON positions: degrees to 1e-6, some 0.1 m. */
export function positionsText(places: Float64Array): string {
  const positions: string[] = []
  for (let i = 0; i < places.length; i += 2) {
    positions.push(`[${degrees(places[i + 1])},${degrees(places[i])}]`)
  }
  return `[${positions.join(',')}]`
}

function degrees(radians: number): number {
  return Math.round((radians / DEGREE) * 1e6) / 1e6
}
