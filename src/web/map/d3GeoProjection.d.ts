/** The part of d3-geo-projection used here; the package ships no types. */
declare module 'd3-geo-projection' {
  import type { GeoStreamWrapper } from 'd3-geo'
  import type { Feature } from 'geojson'

  export function geoProject<Kind extends Feature>(
    feature: Kind,
    projection: GeoStreamWrapper,
  ): Kind
}
