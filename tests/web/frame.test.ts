import { geoDistance, geoRotation } from 'd3-geo'
import fc from 'fast-check'
import { expect, test } from 'vitest'
import { frameFor, sphereDistance, wrapped } from '../../src/web/map/frame.ts'
import { graticule } from '../../src/web/map/graticule.ts'
import { scaleBar } from '../../src/web/map/scale.ts'

const latitude = fc.double({ min: -90, max: 90, noNaN: true })
const longitude = fc.double({ min: -180, max: 179.999, noNaN: true })

test('a turned globe is d3-geo’s rotation by the same angles', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 81, max: 90 }),
      longitude,
      latitude,
      longitude,
      (middle, meridian, φ, λ) => {
        const frame = frameFor([{ latitudeDeg: middle, longitudeDeg: meridian }])
        if (!frame.turnedTo) throw new Error('not turned')
        const [x, y] = frame.toMap(φ, λ)
        const [turnX, turnY] = geoRotation([-frame.turnedTo[0], -frame.turnedTo[1]])([λ, φ])
        const off = geoDistance([x, y], [turnX, turnY])
        expect(off).toBeLessThan(1e-7)
      },
    ),
  )
})

test('every place comes back from the map, upright or turned', () => {
  fc.assert(
    fc.property(latitude, longitude, latitude, longitude, (middle, meridian, φ, λ) => {
      const frame = frameFor([{ latitudeDeg: middle, longitudeDeg: meridian }])
      const [east, north] = frame.toEarth(frame.toMap(φ, λ))
      expect(geoDistance([east, north], [λ, φ])).toBeLessThan(1e-7)
    }),
  )
})

test('the launch of a polar flight lies in the middle of a turned map, north up', () => {
  const frame = frameFor([{ latitudeDeg: 88, longitudeDeg: -40 }])
  expect(frame.toMap(88, -40)[0]).toBeCloseTo(0, 9)
  expect(frame.toMap(88, -40)[1]).toBeCloseTo(0, 9)
  expect(frame.toMap(89, -40)[1]).toBeCloseTo(1, 9)
  // The pole is 2° away, straight up.
  expect(frame.toMap(90, 17)[1]).toBeCloseTo(2, 9)
})

test('a flight across the antimeridian runs on instead of round the world', () => {
  const frame = frameFor([{ latitudeDeg: 52, longitudeDeg: 179.8 }])
  expect(frame.toMap(52, 179.8)[0]).toBeCloseTo(179.8, 9)
  expect(frame.toMap(52, -179.5)[0]).toBeCloseTo(180.5, 9)
})

test('distances are those of the sphere', () => {
  // A degree of a great circle of the sphere of radius 6 371 009 m.
  expect(sphereDistance([0, 0], [0, 1])).toBeCloseTo(111_195.1, 0)
  expect(sphereDistance([179.5, 0], [-179.5, 0])).toBeCloseTo(111_195.1, 0)
  fc.assert(
    fc.property(latitude, longitude, latitude, longitude, (a, b, c, d) => {
      const expected = geoDistance([b, a], [d, c]) * 6_371_009
      expect(Math.abs(sphereDistance([b, a], [d, c]) - expected)).toBeLessThan(10)
    }),
  )
})

test('every line of the graticule is where its label says, and there are neither none nor many', () => {
  fc.assert(
    fc.property(
      fc.double({ min: -89, max: 89, noNaN: true }),
      longitude,
      fc.double({ min: 0.02, max: 8, noNaN: true }),
      (middle, meridian, half) => {
        const frame = frameFor([{ latitudeDeg: middle, longitudeDeg: meridian }])
        const [x, y] = frame.toMap(middle, meridian)
        const lines = graticule(frame, [x - half, y - half, x + half, y + half])
        expect(lines.length).toBeGreaterThan(0)
        expect(lines.length).toBeLessThan(40)
        for (const { kind, label, points } of lines) {
          const [, degrees, side] = /^([\d.]+)° ?([NSEW]?)$/.exec(label) ?? []
          const value = Number(degrees) * (side === 'S' || side === 'W' ? -1 : 1)
          for (const point of points) {
            const [east, north] = frame.toEarth(point)
            if (kind === 'parallel') expect(Math.abs(north - value)).toBeLessThan(1e-6)
            // A meridian has no longitude of its own at a pole.
            else if (Math.abs(north) < 89.99) {
              expect(Math.abs(wrapped(east - value))).toBeLessThan(1e-6)
            }
          }
        }
      },
    ),
  )
})

test('the distance scale is the longest round length that has room', () => {
  expect(scaleBar(100, 160)).toEqual({ pixels: 100, length: 10_000 })
  expect(scaleBar(130, 160)).toEqual({ pixels: 20_000 / 130, length: 20_000 })
  expect(scaleBar(0.003, 160).length).toBeCloseTo(0.2, 9)
})
