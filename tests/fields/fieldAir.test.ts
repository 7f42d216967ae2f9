import { describe, expect, it } from 'vitest'
import { FieldAir } from '../../src/fields/fieldAir.ts'
import { OutsideField } from '../../src/fields/outsideField.ts'
import { emptyAirState, type AirState } from '../../src/physics/air.ts'
import { geometricAltitude } from '../../src/physics/earth.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { fixtureBytes, readPlanes } from './fixture.ts'
import { fieldFolder } from './storedField.ts'
import { CODES, gridSection, latLonSection, syntheticMessage } from './synthetic.ts'

const DEGREE = Math.PI / 180
const fields = fieldFolder()
const START = Date.UTC(2011, 0, 15, 12) / 1000 // 2011-01-10 12 UTC + 120 h

function sampled(
  air: FieldAir,
  latitude: number,
  longitude: number,
  altitude: number,
  time: number,
): AirState {
  const out = emptyAirState()
  air.sample(latitude * DEGREE, longitude * DEGREE, altitude, time, out)
  return out
}

describe('a real forecast over a region, two times', async () => {
  const bytes = fixtureBytes('gfs-region')
  const file = await fields.store(bytes, 'region')
  const { planes } = await readPlanes(bytes)
  const air = new FieldAir(file, 'refuse')

  it('is described by its header', () => {
    expect(file.header).toMatchObject({
      origin: { centre: 7, process: 96 },
      referenceTime: START - 120 * 3600,
      validTimes: [START, START + 3 * 3600],
      skipped: [],
    })
    expect(file.header.levels).toHaveLength(26)
    expect(file.header.levels[0]).toBe(100_000)
    expect(file.header.levels[25]).toBe(1000)
    expect(file.header.humidity).toMatchObject({ quantity: 'relativeHumidity' })
    expect(file.grid.description).toBe('latitude-longitude, 2.5° by 2.5°')
  })

  it('has at each grid point and time what the messages have', () => {
    let compared = 0
    for (const plane of planes) {
      for (const [column, row] of [
        [0, 0],
        [12, 8],
        [5, 3],
      ]) {
        const { latitude, longitude } = plane.grid.position(column, row)
        const level = air
          .column(latitude, longitude, plane.validTime)
          .find(({ pressure }) => pressure === plane.pressure)
        const value = plane.values[row * 13 + column]
        const got = level?.[plane.quantity as 'temperature' | 'relativeHumidity']
        expect(Math.abs((got ?? NaN) - value), plane.quantity).toBeLessThan(
          1e-6 * Math.abs(value) + 1e-7,
        )
        compared++
      }
    }
    expect(compared).toBeGreaterThan(700)
  })

  it('is linear in time and horizontally', () => {
    const corners = [
      [50, 255],
      [50, 257.5],
      [47.5, 255],
      [47.5, 257.5],
    ]
    const of = (latitude: number, longitude: number, time: number) =>
      air.column(latitude * DEGREE, longitude * DEGREE, time)[10]
    for (const key of [
      'temperature',
      'geopotentialHeight',
      'windEast',
      'windNorth',
      'vapourPressure',
    ] as const) {
      const mean = (values: number[]) => values.reduce((a, b) => a + b) / values.length
      const ends = [0, 10_800].map((seconds) =>
        mean(
          corners.map(
            ([latitude, longitude]) => of(latitude, longitude, START + seconds)[key] ?? NaN,
          ),
        ),
      )
      const middle = of(48.75, 256.25, START + 5400)[key]
      expect(middle).toBeCloseTo(mean(ends), 9)
      const third = of(48.75, 256.25, START + 3600)[key]
      expect(third).toBeCloseTo(ends[0] * (2 / 3) + ends[1] * (1 / 3), 9)
    }
  })

  it('is between and beyond its levels what a sounding of its column is', () => {
    const [latitude, longitude, time] = [41.3, 268.7, START + 4000]
    const profile = new ProfileAir(air.column(latitude * DEGREE, longitude * DEGREE, time))
    const expected = emptyAirState()
    for (let altitude = -400; altitude < 48_000; altitude += 83) {
      const got = sampled(air, latitude, longitude, altitude, time)
      profile.sampleAltitude(altitude, expected)
      for (const key of Object.keys(expected) as (keyof AirState)[]) {
        expect(Math.abs(got[key] - expected[key]), `${key} at ${altitude}`).toBeLessThan(
          1e-10 * Math.abs(expected[key]) + 1e-12,
        )
      }
    }
  })

  it('takes a longitude by any name', () => {
    const east = sampled(air, 45, 260.3, 9000, START)
    for (const longitude of [-99.7, 260.3 + 720]) {
      const same = sampled(air, 45, longitude, 9000, START)
      expect(same.temperature).toBeCloseTo(east.temperature, 9)
      expect(same.windNorth).toBeCloseTo(east.windNorth, 9)
    }
  })

  it('refuses what it does not cover and says what it covers', () => {
    for (const [latitude, longitude, time, beyond] of [
      [51, 260, START, 'grid'],
      [29, 260, START, 'grid'],
      [45, 254, START, 'grid'],
      [45, 100, START, 'grid'],
      [45, 260, START - 1, 'times'],
      [45, 260, START + 10_801, 'times'],
    ] as const) {
      let refusal: unknown
      try {
        sampled(air, latitude, longitude, 1000, time)
      } catch (error) {
        refusal = error
      }
      if (!(refusal instanceof OutsideField))
        throw new Error(`${latitude} ${longitude} was not refused`)
      expect(refusal.beyond).toBe(beyond)
      expect(refusal.coverage).toMatchObject({ firstTime: START, lastTime: START + 10_800 })
      expect(refusal.coverage.corners[0].latitude / DEGREE).toBeCloseTo(50, 9)
      expect(refusal.coverage.corners[3].longitude / DEGREE).toBeCloseTo(285, 9)
    }
    expect(() => air.column(60 * DEGREE, 0, START)).toThrow(OutsideField)
  })

  it('may hold the nearest instead, and says that it did', () => {
    const holding = new FieldAir(file, 'hold')
    const inside = sampled(holding, 50, 255, 9000, START)
    expect(holding.takeUse()).toEqual({
      heldPlace: false,
      heldTime: false,
      aboveLevels: null,
      belowLevels: null,
    })
    expect(sampled(holding, 55, 250, 9000, START)).toEqual(inside)
    expect(holding.takeUse()).toMatchObject({ heldPlace: true, heldTime: false })
    expect(sampled(holding, 50, 255, 9000, START - 86_400)).toEqual(inside)
    expect(holding.takeUse()).toMatchObject({ heldPlace: false, heldTime: true })
    expect(sampled(holding, 50, 255, 9000, START + 1e6)).toEqual(
      sampled(holding, 50, 255, 9000, START + 10_800),
    )
  })

  it('says how far beyond its levels it was used', () => {
    air.takeUse()
    sampled(air, 45, 260, 20_000, START)
    expect(air.takeUse()).toMatchObject({ aboveLevels: null, belowLevels: null })
    sampled(air, 45, 260, 33_000, START)
    sampled(air, 45, 260, -100, START)
    const { aboveLevels, belowLevels } = air.takeUse()
    const column = air.column(45 * DEGREE, 260 * DEGREE, START)
    expect(aboveLevels?.top).toBe(33_000)
    expect(aboveLevels?.bottom).toBeCloseTo(geometricAltitude(column[25].geopotentialHeight), 6)
    expect(belowLevels?.bottom).toBe(-100)
    expect(belowLevels?.top).toBeCloseTo(geometricAltitude(column[0].geopotentialHeight), 6)
    expect(air.takeUse()).toMatchObject({ aboveLevels: null, belowLevels: null })
  })
})

describe('a forecast over the globe', async () => {
  const file = await fields.store(fixtureBytes('gfs-500-250hPa'), 'globe')
  const air = new FieldAir(file, 'refuse')

  it('has no seam where its longitudes close', () => {
    const at = (longitude: number) => sampled(air, 47.1, longitude, 8000, START)
    const [west, seam, east] = [at(357.5), at(358.75), at(0)]
    for (const key of ['temperature', 'windEast', 'windNorth'] as const) {
      expect(seam[key]).toBeCloseTo((west[key] + east[key]) / 2, 1) // T and u are linear on levels, not quite at a height
    }
    expect(at(-1.25)).toEqual(seam)
    expect(at(360)).toEqual(east)
    expect(at(359.999_999).temperature).toBeCloseTo(east.temperature, 5)
    const column = (longitude: number) => air.column(47.1 * DEGREE, longitude * DEGREE, START)[0]
    expect(column(358.75).windEast).toBeCloseTo(
      (column(357.5).windEast + column(0).windEast) / 2,
      9,
    )
  })

  it('reaches both poles', () => {
    expect(sampled(air, 90, 12, 8000, START).temperature).toBeGreaterThan(180)
    expect(sampled(air, -90, 12, 8000, START).temperature).toBeGreaterThan(180)
  })
})

/** An invented atmosphere on any grid: height by pressure, temperature by height, a steady wind. */
function inventedField(
  grid: Buffer,
  points: number,
  wind: (point: number) => readonly [number, number],
  gap: (point: number, pressure: number) => boolean = () => false,
): Buffer {
  const pressures = [100_000, 70_000, 40_000, 10_000]
  const messages: Buffer[] = []
  for (const hours of [120, 126]) {
    for (const pressure of pressures) {
      const height = -7000 * Math.log(pressure / 101_325)
      const add = (code: readonly [number, number], value: (point: number) => number) =>
        messages.push(
          syntheticMessage(grid, {
            code,
            pressure,
            hours,
            values: Array.from({ length: points }, (_, point) =>
              gap(point, pressure) ? NaN : value(point),
            ),
          }),
        )
      add(CODES.geopotential, () => height * 9.80665)
      add(CODES.temperature, () => 288 - 0.004 * height)
      add(CODES.specificHumidity, () => 0.004)
      add(CODES.windEast, (point) => wind(point)[0])
      add(CODES.windNorth, (point) => wind(point)[1])
    }
  }
  return Buffer.concat(messages)
}

describe('an invented field', () => {
  it.each([0, 1, 2, 3, 4])(
    'on projected grid %d gives winds towards east and north, whatever its axes',
    async (nth) => {
      const section = gridSection('projections', nth)
      const { grid } = (
        await readPlanes(
          syntheticMessage(section, {
            code: CODES.temperature,
            pressure: 5000,
            hours: 0,
            values: Array<number>(20).fill(250),
          }),
        )
      ).planes[0]
      expect(grid.windsAlongGrid).toBe(true)
      // A wind of 30 m/s towards north-north-east at every point, taken apart along the grid's axes.
      const [east, north] = [30 * Math.sin(0.4), 30 * Math.cos(0.4)]
      const file = await fields.store(
        inventedField(section, 20, (point) => {
          const turn = grid.turn(point % 5, Math.floor(point / 5))
          return [
            east * Math.cos(turn) + north * Math.sin(turn),
            north * Math.cos(turn) - east * Math.sin(turn),
          ]
        }),
        `projected-${nth}`,
      )
      const air = new FieldAir(file, 'refuse')
      const place = grid.position(2.3, 1.6)
      const out = emptyAirState()
      air.sample(place.latitude, place.longitude, 6000, START, out)
      expect(out.windEast).toBeCloseTo(east, 4)
      expect(out.windNorth).toBeCloseTo(north, 4)
    },
  )

  it('takes height from geopotential and vapour pressure from specific humidity', async () => {
    const section = latLonSection(6, 5, 10, 350, 5)
    const air = new FieldAir(
      await fields.store(
        inventedField(section, 30, () => [1, 2]),
        'specific',
      ),
      'refuse',
    )
    const [lowest] = air.column(0, 0, START)
    expect(lowest.geopotentialHeight).toBeCloseTo(-7000 * Math.log(100_000 / 101_325), 2)
    // q = 0.622·e/(p − 0.378·e) (WMO-No. 8, annex on humidity formulae)
    const vapour = lowest.vapourPressure ?? NaN
    expect((0.622 * vapour) / (100_000 - 0.378 * vapour)).toBeCloseTo(0.004, 7)
  })

  it('is completed under the ground and between levels, and refused where a place has nothing', async () => {
    const section = latLonSection(6, 5, 10, 350, 5)
    const bytes = inventedField(
      section,
      30,
      (point) => [point < 30 ? 5 : 0, 2],
      (point, pressure) =>
        (point === 7 && pressure === 100_000) ||
        (point === 10 && pressure === 40_000) ||
        point === 28,
    )
    const air = new FieldAir(await fields.store(bytes, 'gaps'), 'refuse')
    const column = (point: number) =>
      air.column((10 - 5 * Math.floor(point / 6)) * DEGREE, (350 + 5 * (point % 6)) * DEGREE, START)
    // 6.5 K/km down from the level at 700 hPa, in hydrostatic balance.
    const [ground, above] = column(7)
    expect(ground.temperature - above.temperature).toBeCloseTo(
      0.0065 * (above.geopotentialHeight - ground.geopotentialHeight),
      3,
    )
    // Of a temperature that is linear in height the mean in ln p is the logarithmic one.
    const logMean =
      (ground.temperature - above.temperature) / Math.log(ground.temperature / above.temperature)
    const meanVirtual = logMean * (1 + 0.608 * 0.004)
    expect(above.geopotentialHeight - ground.geopotentialHeight).toBeCloseTo(
      ((287.05287 * meanVirtual) / 9.80665) * Math.log(100_000 / 70_000),
      0,
    )
    // Heights here are linear in ln p, so the bridged level is where it was.
    expect(column(10)[2].geopotentialHeight).toBeCloseTo(-7000 * Math.log(40_000 / 101_325), 2)
    expect(() => column(28)).toThrow(OutsideField)
    expect(() => sampled(air, -9.9, 369.9, 5000, START)).toThrow("outside the field's values")
  })
})
