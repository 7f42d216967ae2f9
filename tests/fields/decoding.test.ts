// Every expected value in this file is the reference decoder's (ecCodes 2.28, grib_get_data), kept beside
// the fixtures; see tests/fixtures/fields/README.md.
import { describe, expect, it } from 'vitest'
import { fixtureBytes, fixtureExpected, inMessageOrder, readPlanes } from './fixture.ts'

/** The reference's text has nine digits. */
const DIGITS = 1e-8

function expectSame(got: number, expected: number | null, where: string): void {
  if (expected === null) expect(got, where).toBeNaN()
  else
    expect(Math.abs(got - expected), where).toBeLessThanOrEqual(DIGITS * Math.abs(expected) + 1e-9)
}

interface Summary {
  name?: string
  count: number
  least: number
  greatest: number
  mean: number
  everyNth: number
  sample: (number | null)[]
}

describe.each(['gfs-500-250hPa', 'packings-globe'])('%s', (name) => {
  it('decodes as the reference decoder does', async () => {
    const { planes, skipped } = await readPlanes(fixtureBytes(name))
    const expected = fixtureExpected(name) as Summary[]
    expect(skipped).toEqual([])
    expect(planes).toHaveLength(expected.length)
    planes.forEach((plane, index) => {
      const wanted = expected[index]
      const values = plane.values.map((value) => value / plane.unit)
      const where = `message ${index} ${wanted.name ?? plane.quantity}`
      expect(values).toHaveLength(wanted.count)
      expectSame(
        values.reduce((a, b) => Math.min(a, b)),
        wanted.least,
        where,
      )
      expectSame(
        values.reduce((a, b) => Math.max(a, b)),
        wanted.greatest,
        where,
      )
      const mean = values.reduce((a, b) => a + b, 0) / values.length
      expect(Math.abs(mean - wanted.mean), where).toBeLessThan(
        1e-8 * (1 + wanted.greatest - wanted.least),
      )
      wanted.sample.forEach((value, nth) => {
        expectSame(values[nth * wanted.everyNth], value, `${where}, value ${nth * wanted.everyNth}`)
      })
    })
  })
})

it('reads what the messages of the real forecast say about themselves', async () => {
  const { planes } = await readPlanes(fixtureBytes('gfs-500-250hPa'))
  // grib_ls: dataDate 20110110, dataTime 1200, stepRange 120, centre 7, generatingProcessIdentifier 96
  const referenceTime = Date.UTC(2011, 0, 10, 12) / 1000
  expect(planes.map(({ quantity, pressure }) => `${quantity} ${pressure}`).sort()).toEqual(
    [25_000, 50_000]
      .flatMap((pressure) =>
        ['geopotentialHeight', 'relativeHumidity', 'temperature', 'windEast', 'windNorth'].map(
          (quantity) => `${quantity} ${pressure}`,
        ),
      )
      .sort(),
  )
  for (const plane of planes) {
    expect(plane.referenceTime).toBe(referenceTime)
    expect(plane.validTime).toBe(referenceTime + 120 * 3600)
    expect(plane.origin).toEqual({ centre: 7, subCentre: 0, process: 96 })
    expect(plane.grid).toMatchObject({ columns: 144, rows: 73, wraps: true, windsAlongGrid: false })
  }
})

describe('every packing and width', async () => {
  const expected = fixtureExpected('packings') as { name: string; values: (number | null)[] }[]
  const { planes, skipped } = await readPlanes(fixtureBytes('packings'))

  it('is read from the fixture', () => {
    expect(skipped).toEqual([])
    expect(planes).toHaveLength(expected.length)
    expect(expected.length).toBeGreaterThan(55)
  })

  it.each(expected.map(({ name, values }, index) => ({ name, values, index })))(
    '$name',
    ({ values, index }) => {
      expect(planes[index].values).toHaveLength(values.length)
      values.forEach((value, point) => {
        expectSame(inMessageOrder(planes[index], point), value, `value ${point}`)
      })
    },
  )
})

describe('bitmaps', async () => {
  const expected = fixtureExpected('bitmaps') as (number | null)[][]
  const { planes } = await readPlanes(fixtureBytes('bitmaps'))

  it('leave a gap where the reference decoder has one', () => {
    expect(planes).toHaveLength(expected.length)
    expected.forEach((values, index) => {
      expect(values.filter((value) => value === null).length).toBeGreaterThan(20)
      values.forEach((value, point) => {
        expectSame(inMessageOrder(planes[index], point), value, `message ${index} value ${point}`)
      })
    })
  })

  it('are kept for a field that refers back to one in the same message', () => {
    expect(planes.at(-1)).toMatchObject({ quantity: 'geopotentialHeight', pressure: 25_000 })
    expect(planes.at(-2)).toMatchObject({ quantity: 'geopotentialHeight', pressure: 50_000 })
  })
})
