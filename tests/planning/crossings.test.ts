import { expect, test } from 'vitest'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { crossings, extent } from '../../src/planning/crossings.ts'

const DEGREE = Math.PI / 180

/** Up from 400 m to 20 km in 4000 s, down to 1 km in 2000 s, eastwards all the way. */
const track = [
  [0, 400, 0],
  [2000, 10_200, 0.4],
  [4000, 20_000, 0.8],
  [5000, 10_000, 0.9],
  [6000, 1000, 1],
].map(([elapsed, altitude, east]) => ({
  elapsed,
  altitude,
  latitude: 47 * DEGREE,
  longitude: east * DEGREE,
}))

const at = (altitude: number) => ({ kind: 'altitude', altitude }) as const

test('a level is passed on the way up and on the way down, in the order of flight', () => {
  const found = crossings(track, standardAir, 0, [at(15_000), at(5300)])
  expect(found.map(({ way, level, elapsed }) => [way, level, Math.round(elapsed)])).toEqual([
    ['up', at(5300), 1000],
    ['up', at(15_000), 2980],
    ['down', at(15_000), 4500],
    ['down', at(5300), 5522],
  ])
  expect(found[0].longitude / DEGREE).toBeCloseTo(0.2, 9)
  expect(found.map(({ altitude }) => Math.round(altitude))).toEqual([5300, 15_000, 15_000, 5300])
})

test('a level between launch and landing is passed once, one above the burst never', () => {
  expect(crossings(track, standardAir, 0, [at(700)]).map(({ way }) => way)).toEqual(['up'])
  expect(crossings(track, standardAir, 0, [at(20_001)])).toEqual([])
  expect(crossings(track, standardAir, 0, [at(300)])).toEqual([])
})

test('a flight level is met at its pressure', () => {
  // US Standard Atmosphere 1976, table I: 300.9 hPa lies at 9144 m geopotential, 9157 m geometric (FL 300).
  const [up] = crossings(track, standardAir, 0, [{ kind: 'flight-level', flightLevel: 300 }])
  expect(up.pressure / 100).toBeCloseTo(300.9, 1)
  // The straight line in ln p between points 9.8 km apart is off by some 100 m; real tracks are dense.
  expect(Math.abs(up.altitude - 9157)).toBeLessThan(200)
})

test('a flight over the antimeridian reaches from west to east of it', () => {
  const over = track.map((point) => ({
    ...point,
    longitude: point.longitude + (point.elapsed < 3000 ? 179.5 : -180.5) * DEGREE,
  }))
  const reach = extent(over)
  expect(reach.west / DEGREE).toBeCloseTo(179.5, 9)
  expect(reach.east / DEGREE).toBeCloseTo(-179.5, 9)
  // One degree of longitude at 47° north on WGS 84: 76.06 km (Torge and Müller, Geodesy, eq. 4.15).
  expect(reach.farthest.distance).toBeCloseTo(76_056, -2)
  const [down] = crossings(over, standardAir, 0, [at(10_200 + 4900)])
  expect(Math.abs(down.longitude / DEGREE)).toBeGreaterThan(179)
})
