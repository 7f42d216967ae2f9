import { type MapFrame, type MapPlace, wrapped } from './frame.ts'

/** Steps between lines, degrees. */
const STEPS = [0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 15, 30]

/** So many lines each way are about right in a view. */
const LINES = 5

/** Points of a line: enough for it to look bent where the globe is turned. */
const PIECES = 48

/** A meridian or a parallel as it lies on the map. */
export interface GraticuleLine {
  label: string
  kind: 'meridian' | 'parallel'
  points: MapPlace[]
}

/** What is seen of the earth, degrees; west may be below -180 or east above 180. */
interface Seen {
  west: number
  east: number
  south: number
  north: number
}

/** Meridians and parallels through a view of the map: west, south, east, north in the map's degrees. */
export function graticule(
  frame: MapFrame,
  view: [number, number, number, number],
): GraticuleLine[] {
  const seen = seenOf(frame, view)
  const up = stepFor(seen.north - seen.south)
  const middle = (seen.north + seen.south) / 2
  const across = Math.max(stepFor(seen.east - seen.west), stepAtLatitude(up, middle))
  return [
    ...multiples(seen.south, seen.north, up)
      .filter((latitude) => Math.abs(latitude) < 90)
      .map((latitude): GraticuleLine => ({
        kind: 'parallel',
        label: degreesLabel(latitude, up, 'N', 'S'),
        points: along(seen.west, seen.east, (longitude) => frame.toMap(latitude, longitude)),
      })),
    ...multiples(seen.west, seen.east, across)
      .filter((longitude) => longitude < seen.west + 360)
      .map((longitude): GraticuleLine => ({
        kind: 'meridian',
        label: degreesLabel(wrapped(longitude), across, 'E', 'W'),
        points: along(Math.max(seen.south, -90), Math.min(seen.north, 90), (latitude) =>
          frame.toMap(latitude, longitude),
        ),
      })),
  ].map((line) => ({ ...line, points: unbroken(line.points) }))
}

function seenOf(
  frame: MapFrame,
  [west, south, east, north]: [number, number, number, number],
): Seen {
  if (!frame.turnedTo)
    return { west, south: Math.max(south, -85), east, north: Math.min(north, 85) }
  const places: [number, number][] = []
  const middle = frame.toEarth([(west + east) / 2, (south + north) / 2])
  for (let i = 0; i <= 16; i++) {
    for (let j = 0; j <= 16; j++) {
      const [longitude, latitude] = frame.toEarth([
        west + ((east - west) * i) / 16,
        south + ((north - south) * j) / 16,
      ])
      places.push([middle[0] + wrapped(longitude - middle[0]), latitude])
    }
  }
  const seen = {
    west: Math.min(...places.map(([longitude]) => longitude)),
    east: Math.max(...places.map(([longitude]) => longitude)),
    south: Math.min(...places.map(([, latitude]) => latitude)),
    north: Math.max(...places.map(([, latitude]) => latitude)),
  }
  for (const pole of [-90, 90]) {
    const [x, y] = frame.toMap(pole, 0)
    if (x < west || x > east || y < south || y > north) continue
    Object.assign(seen, { west: -180, east: 180 }, pole > 0 ? { north: 90 } : { south: -90 })
  }
  return seen
}

function stepFor(span: number): number {
  return STEPS.find((step) => span / step <= LINES + 1) ?? 30
}

/** Meridians draw together towards a pole: their step grows as they do. */
function stepAtLatitude(step: number, latitude: number): number {
  const wanted = (0.7 * step) / Math.max(Math.cos((latitude * Math.PI) / 180), 0.02)
  return STEPS.find((choice) => choice >= wanted) ?? 30
}

function multiples(from: number, to: number, step: number): number[] {
  const first = Math.ceil(from / step - 1e-9)
  const count = Math.max(0, Math.floor(to / step + 1e-9) - first + 1)
  return Array.from({ length: count }, (_, index) => (first + index) * step)
}

function along(from: number, to: number, place: (value: number) => MapPlace): MapPlace[] {
  return Array.from({ length: PIECES + 1 }, (_, piece) =>
    place(from + ((to - from) * piece) / PIECES),
  )
}

/** A line whose longitudes run on where the map's sheet ends. */
function unbroken(points: MapPlace[]): MapPlace[] {
  let turns = 0
  return points.map(([x, y], index) => {
    if (index > 0) {
      const step = x - points[index - 1][0]
      if (step > 180) turns -= 360
      if (step < -180) turns += 360
    }
    return [x + turns, y]
  })
}

function degreesLabel(value: number, step: number, positive: string, negative: string): string {
  const decimals = step < 0.1 ? 2 : step < 1 ? 1 : 0
  const text = `${Math.abs(value).toFixed(decimals)}°`
  if (Math.abs(value) < step / 2 || Math.abs(value) > 180 - step / 2) return text
  return `${text} ${value > 0 ? positive : negative}`
}
