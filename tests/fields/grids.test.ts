// Expected places and values are the reference decoder's (ecCodes 2.28, grib_get_data).
import geographiclib from 'geographiclib-geodesic'
import { describe, expect, it } from 'vitest'
import { coneThrough, ConformalCone } from '../../src/fields/conicGrid.ts'
import { inRows } from '../../src/fields/scanning.ts'
import { fixtureBytes, fixtureExpected, inMessageOrder, readPlanes } from './fixture.ts'
import { CODES, gridSection, syntheticMessage } from './synthetic.ts'

const DEGREE = Math.PI / 180

interface Points {
  latitudes: number[]
  longitudes: number[]
  values: number[]
}

describe.each(['scanning', 'projections'])('%s', async (name) => {
  const expected = fixtureExpected(name) as Points[]
  const { planes, skipped } = await readPlanes(fixtureBytes(name))

  it('is read from the fixture', () => {
    expect(skipped).toEqual([])
    expect(planes).toHaveLength(expected.length)
  })

  it.each(expected.map((points, index) => ({ points, index })))(
    'message $index: each value at its place',
    ({ points, index }) => {
      const { grid, values } = planes[index]
      const place = { column: NaN, row: NaN }
      points.latitudes.forEach((latitude, point) => {
        grid.locate(latitude * DEGREE, points.longitudes[point] * DEGREE, place)
        const column = Math.round(place.column)
        const row = Math.round(place.row)
        // The reference's text has seven decimals, a hundredth of a metre, of which steps are 800 m and up.
        expect(Math.abs(place.column - column)).toBeLessThan(2e-4)
        expect(Math.abs(place.row - row)).toBeLessThan(2e-4)
        expect(values[row * grid.columns + column]).toBeCloseTo(points.values[point], 6)
        const position = grid.position(column, row)
        expect(position.latitude / DEGREE).toBeCloseTo(latitude, 8)
        const turns = (position.longitude / DEGREE - points.longitudes[point]) / 360
        expect(Math.abs(turns - Math.round(turns)) * 360).toBeLessThan(1e-8)
      })
    },
  )
})

describe('a projected grid', () => {
  // Octet 65 is the scanning mode; the grid of the fixture scans towards east and north.
  const scanned = async (mode: number) => {
    const section = gridSection('projections', 0)
    section[64] = mode
    const values = Array.from({ length: 20 }, (_, point) => point)
    const message = syntheticMessage(section, {
      code: CODES.temperature,
      pressure: 50_000,
      hours: 0,
      values,
    })
    return (await readPlanes(message)).planes[0].grid
  }

  it.each([
    [0x40, 1, 1],
    [0x00, 1, -1],
    [0xc0, -1, 1],
    [0x80, -1, -1],
  ])(
    'has its first point first in scanning mode %i and runs on as that says',
    async (mode, x, y) => {
      const north = await scanned(0x40)
      const grid = await scanned(mode)
      for (const [column, row] of [
        [0, 0],
        [3, 2],
      ]) {
        const expected = north.position(column * x, row * y)
        const got = grid.position(column, row)
        expect(got.latitude).toBeCloseTo(expected.latitude, 12)
        expect(got.longitude).toBeCloseTo(expected.longitude, 12)
      }
    },
  )

  it('with its apex in the south is the mirror of one with its apex in the north', () => {
    const earth = { semiMajorAxis: 6_378_137, eccentricity: 0.0818 }
    const [first, second] = [30 * DEGREE, 50 * DEGREE]
    const north = new ConformalCone(earth, coneThrough(first, second, earth), first, 1)
    const south = new ConformalCone(earth, coneThrough(-first, -second, earth), -first, 1)
    const [a, b] = [
      { x: 0, y: 0 },
      { x: 0, y: 0 },
    ]
    for (const [latitude, longitude] of [
      [0.3, 1.2],
      [0.8, 0.4],
    ]) {
      north.project(latitude, longitude, a)
      south.project(-latitude, longitude, b)
      expect(b.x).toBeCloseTo(a.x, 5)
      expect(b.y).toBeCloseTo(-a.y, 5)
      expect(south.turn(longitude)).toBeCloseTo(-north.turn(longitude), 12)
      const back = south.unproject(b.x, b.y)
      expect(back.latitude).toBeCloseTo(-latitude, 10)
      expect(back.longitude).toBeCloseTo(longitude, 10)
    }
  })
})

it('reads alternating columns by the words of WMO flag table 3.4', () => {
  // Three columns of two points, the second one running the other way.
  const scanning = { eastward: true, northward: true, columnsFirst: true, alternating: true }
  const values = Float64Array.of(1, 2, 4, 3, 5, 6)
  expect([...inRows(values, 3, 2, scanning)]).toEqual([1, 3, 5, 2, 4, 6])
})

it('turns winds along a projected grid by the angle that a geodesic along its x axis has', async () => {
  const { planes } = await readPlanes(fixtureBytes('projections'))
  let turned = 0
  for (const { grid } of planes.filter(({ grid: { windsAlongGrid } }) => windsAlongGrid)) {
    for (const [column, row] of [
      [0, 0],
      [2, 1],
      [3.5, 2.5],
    ]) {
      const from = grid.position(column - 1e-4, row)
      const to = grid.position(column + 1e-4, row)
      // On a sphere, as all but one of these grids are; that one differs by less than the tolerance.
      const sphere = new geographiclib.Geodesic.Geodesic(6_371_229, 0)
      const { azi1 } = sphere.Inverse(
        from.latitude / DEGREE,
        from.longitude / DEGREE,
        to.latitude / DEGREE,
        to.longitude / DEGREE,
      )
      const eastward = grid.scanning.eastward ? 0 : 180
      const angle = 90 - (azi1 ?? NaN) - eastward
      const off = (grid.turn(column, row) / DEGREE - angle) / 360
      expect(Math.abs(off - Math.round(off)) * 360).toBeLessThan(0.15)
      turned++
    }
  }
  expect(turned).toBe(15)
})

it('keeps the order of a message for the fixture helper', async () => {
  const { planes } = await readPlanes(fixtureBytes('scanning'))
  expect(inMessageOrder(planes[0], 5)).toBe(255)
})
