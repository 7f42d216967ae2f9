import fc from 'fast-check'
import { expect, test } from 'vitest'
import {
  drift,
  geometricAltitude,
  geopotentialHeight,
  gravity,
  wrapLongitude,
} from '../../src/physics/earth.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { DEGREE } from './plans.ts'

test('geopotential heights of the US Standard Atmosphere 1976, table I', () => {
  // Geometric m, geopotential m
  for (const [z, h] of [
    [10_000, 9984],
    [20_000, 19_937],
    [30_000, 29_859],
    [50_000, 49_610],
  ]) {
    expect(Math.abs(geopotentialHeight(z) - h)).toBeLessThan(0.51)
    expect(geometricAltitude(geopotentialHeight(z))).toBeCloseTo(z, 6)
  }
})

test('gravity at 30 km is 9.7147 m/s² (US Standard Atmosphere 1976, table II)', () => {
  expect(gravity(30_000)).toBeCloseTo(9.7147, 3)
  expect(gravity(0)).toBe(9.80665)
})

test('small steps add up to the geodesic’s length (Karney’s GeographicLib)', () => {
  for (const latitude of [0, 30, 47, 75]) {
    const start = { latitude: latitude * DEGREE, longitude: 0.1 }
    const north = { ...start }
    for (let step = 0; step < 1000; step++) drift(north, 0, 0, 150)
    expect(geodesicLine(start, north).distance).toBeCloseTo(150_000, 1)
    expect(geodesicLine(start, north).bearing).toBeCloseTo(0, 9)
  }
  // Along the equator, which is a geodesic too.
  const start = { latitude: 0, longitude: 3.1 }
  const east = { ...start }
  for (let step = 0; step < 1000; step++) drift(east, 0, 150, 0)
  expect(geodesicLine(start, east).distance).toBeCloseTo(150_000, 1)
})

test('a drift there and back ends where it began, wherever that is', () => {
  fc.assert(
    fc.property(
      fc.double({ min: -89, max: 89, noNaN: true }),
      fc.double({ min: -500, max: 500, noNaN: true }),
      fc.double({ min: -500, max: 500, noNaN: true }),
      (latitude, east, north) => {
        const at = { latitude: latitude * DEGREE, longitude: 1 }
        drift(at, 10_000, east, north)
        drift(at, 10_000, -east, -north)
        expect(Math.abs(at.latitude - latitude * DEGREE) * 6.4e6).toBeLessThan(0.1)
        expect(Math.abs(at.longitude - 1) * 6.4e6 * Math.cos(at.latitude)).toBeLessThan(1)
      },
    ),
  )
})

test('a drift over the pole comes down on the other side', () => {
  const at = { latitude: 89.999 * DEGREE, longitude: 0.5 }
  drift(at, 0, 0, 1000)
  expect(at.latitude / DEGREE).toBeCloseTo(89.99205, 4)
  expect(at.longitude).toBeCloseTo(0.5 + Math.PI, 9)
})

test('longitudes are wrapped into [-π, π)', () => {
  expect(wrapLongitude(Math.PI)).toBe(-Math.PI)
  expect(wrapLongitude(-Math.PI)).toBe(-Math.PI)
  expect(wrapLongitude(7)).toBeCloseTo(7 - 2 * Math.PI, 12)
  expect(wrapLongitude(-10)).toBeCloseTo(-10 + 4 * Math.PI, 12)
})
