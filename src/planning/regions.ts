import pointInPolygon from 'point-in-polygon-hao'

/** An area on the map, sides straight in longitude and latitude as RFC 7946 has them. Radians. */
export interface Region {
  name: string | null
  /** Polygons of closed rings of [longitude, latitude]: the outer one, then holes */
  polygons: [number, number][][][]
}

/** Whether a place, radians, lies in a region or on its edge. Regions may cross the antimeridian. */
export function isInside(region: Region, latitude: number, longitude: number): boolean {
  for (let turn = -1; turn <= 1; turn++) {
    const point: [number, number] = [longitude + turn * 2 * Math.PI, latitude]
    if (region.polygons.some((rings) => pointInPolygon(point, rings) !== false)) return true
  }
  return false
}
