import { geoArea, geoEquirectangular } from 'd3-geo'
import { geoProject } from 'd3-geo-projection'
import type { Feature, Geometry, MultiLineString, Position } from 'geojson'
import { feature, mesh } from 'topojson-client'
import type { GeometryCollection, Topology } from 'topojson-specification'

/** What the map asks for: a map of the world's coasts, cut to what can be seen of it. */
export interface CoastWish {
  number: number
  /** Where the TopoJSON of that scale lies */
  url: string
  turnedTo: [number, number] | null
  /** Null for all of the map */
  extent: Extent | null
}

/** A part of the map: west, south, east, north in its degrees. */
export type Extent = [number, number, number, number]

export interface CoastAnswer {
  number: number
  land: Feature
  borders: Feature
}

/** The world at one scale, degrees of longitude and latitude. */
interface World {
  land: Position[][][]
  borders: MultiLineString
}

const worlds = new Map<string, Promise<World>>()

onmessage = (event: MessageEvent<CoastWish>) => {
  void answer(event.data)
}

async function answer({ number, url, turnedTo, extent }: CoastWish): Promise<void> {
  const { land, borders } = await load(url)
  const projection = geoEquirectangular()
    .reflectY(true)
    .scale(180 / Math.PI)
    .translate([0, 0])
    .precision(0.1)
    .rotate(turnedTo ? [-turnedTo[0], -turnedTo[1]] : [0, 0])
  if (extent) {
    projection.clipExtent([
      [extent[0], extent[1]],
      [extent[2], extent[3]],
    ])
  }
  const near = extent && !turnedTo ? land.filter(([outer]) => mayReach(outer, extent)) : land
  const drawn = (geometry: Geometry): Feature =>
    geoProject({ type: 'Feature', properties: {}, geometry }, projection)
  const made: CoastAnswer = {
    number,
    land: drawn({ type: 'MultiPolygon', coordinates: near }),
    borders: drawn(borders),
  }
  postMessage(made)
}

function load(url: string): Promise<World> {
  let world = worlds.get(url)
  if (!world) {
    world = fetch(url)
      .then((response) => response.json() as Promise<Topology>)
      .then(worldOf)
    world.catch(() => worlds.delete(url))
    worlds.set(url, world)
  }
  return world
}

function worldOf(topology: Topology): World {
  const countries = topology.objects.countries as GeometryCollection
  const land = feature(topology, topology.objects.land as GeometryCollection)
  const polygons = land.features.flatMap(({ geometry }) =>
    geometry.type === 'MultiPolygon' ? geometry.coordinates : [],
  )
  return {
    // A few islets of three corners turn the wrong way round, and so would be all the rest of the world.
    land: polygons.filter((coordinates) => geoArea({ type: 'Polygon', coordinates }) < 2 * Math.PI),
    borders: mesh(topology, countries, (one, other) => one !== other),
  }
}

/** Whether a ring may have something inside an extent: one that crosses the antimeridian always may. */
function mayReach(ring: Position[], [west, south, east, north]: Extent): boolean {
  let [left, bottom, right, top] = [Infinity, Infinity, -Infinity, -Infinity]
  for (const [x, y] of ring) {
    if (x < left) left = x
    if (x > right) right = x
    if (y < bottom) bottom = y
    if (y > top) top = y
  }
  const around = right - left > 180
  return (around || (left <= east && right >= west)) && bottom <= north && top >= south
}
