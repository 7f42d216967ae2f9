import { describe, expect, it } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { Column } from '../../src/physics/column.ts'
import { airOfTime } from '../../src/planning/airOfTime.ts'
import { columnOf, recipeKey } from '../../src/planning/airRecipe.ts'
import { type ColumnSource } from '../../src/planning/airSource.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { type Region } from '../../src/planning/regions.ts'
import { type TimeFigures } from '../../src/planning/survey.ts'
import { checkLimits, depthInside, rank, sunElevation } from '../../src/planning/windows.ts'
import { inventedAir, inventedLevels } from './inventedAir.ts'

const DEGREE = Math.PI / 180

function source(id: string, validAt: number | null, turn = 0): ColumnSource {
  const levels = inventedLevels(turn)
  return {
    kind: 'profile',
    id,
    name: id,
    validAt,
    position: null,
    column: new Column(inventedAir(turn)),
    recipe: { kind: 'profile', id, levels },
  }
}

function box(west: number, east: number, south: number, north: number): Region {
  const corners: [number, number][] = [
    [west, south],
    [east, south],
    [east, north],
    [west, north],
    [west, south],
  ]
  return {
    name: null,
    polygons: [[corners.map(([x, y]): [number, number] => [x * DEGREE, y * DEGREE])]],
  }
}

describe('the air of a release time', () => {
  const airs = [source('later', 7200, 0.5), source('earlier', 0)]

  it('is interpolated between two soundings and the nearest beyond them', () => {
    expect(airOfTime(airs, 1800, 'interpolated')).toMatchObject({ how: 'interpolated', age: 1800 })
    expect(airOfTime(airs, -60, 'interpolated')).toMatchObject({ how: 'nearest', age: 60 })
    expect(airOfTime(airs, 9000, 'interpolated').sources[0].id).toBe('later')
    expect(airOfTime(airs, 1800, 'nearest').sources[0].id).toBe('earlier')
    expect(airOfTime([source('only', null)], 0, 'nearest')).toMatchObject({
      how: 'single',
      age: null,
    })
  })

  it('mixes wind and temperature linearly and lies between the pressures', () => {
    const { recipe } = airOfTime(airs, 1800, 'interpolated')
    expect(recipeKey(recipe)).toBe('earlier>0.25>later')
    const [mixed, early, late] = [emptyAirState(), emptyAirState(), emptyAirState()]
    columnOf(recipe).air.sampleAltitude(11_111, mixed)
    airs[1].column.air.sampleAltitude(11_111, early)
    airs[0].column.air.sampleAltitude(11_111, late)
    expect(mixed.windEast).toBeCloseTo(0.75 * early.windEast + 0.25 * late.windEast, 9)
    expect(mixed.windNorth).toBeCloseTo(0.75 * early.windNorth + 0.25 * late.windNorth, 9)
    expect(mixed.pressure).toBeCloseTo(early.pressure, 6)
  })
})

describe('limits of a release time', () => {
  const figures: TimeFigures = {
    releaseRate: 5,
    burstAltitude: 29_000,
    landing: { latitude: 50.5 * DEGREE, longitude: 8.5 * DEGREE, elapsed: 7200, speed: 5 },
    groundWind: 4,
    regionArea: 300e6,
  }

  it('say by how much each is kept or failed', () => {
    const from = { latitude: 50 * DEGREE, longitude: 8 * DEGREE }
    const { distance } = geodesicLine(from, figures.landing)
    const checks = checkLimits(figures, 0, {
      landingInside: [box(8, 9, 50, 51)],
      landingOutside: [box(8.4, 8.6, 50.4, 50.6)],
      landingDistance: { from, atMost: 60_000, atLeast: 70_000 },
      burstAltitude: { atLeast: 30_000, atMost: 31_000 },
      regionArea: 200e6,
      groundWind: 5,
    })
    const margins = Object.fromEntries(checks.map(({ limit, margin }) => [limit, margin]))
    // Half a degree to the nearest side, the eastern or western: 50 to 51° north, some 35.5 km.
    const east = geodesicLine(figures.landing, { latitude: 50.5 * DEGREE, longitude: 9 * DEGREE })
    expect(margins.landingInside / east.distance).toBeCloseTo(1, 2)
    expect(margins.landingOutside).toBeLessThan(-7000)
    expect(margins.landingDistanceAtMost).toBeCloseTo(60_000 - distance, 6)
    expect(margins.landingDistanceAtLeast).toBeCloseTo(distance - 70_000, 6)
    expect(margins.burstAltitudeAtLeast).toBe(-1000)
    expect(margins.burstAltitudeAtMost).toBe(2000)
    expect(margins.regionArea).toBe(-100e6)
    expect(margins.groundWind).toBe(1)
  })

  it('measure areas across the antimeridian', () => {
    const fiji = { latitude: -17 * DEGREE, longitude: -179.9 * DEGREE }
    expect(depthInside([box(179, 181, -18, -16)], fiji)).toBeGreaterThan(90_000)
    expect(depthInside([box(178, 179, -18, -16)], fiji)).toBeLessThan(-100_000)
  })

  it('rank by failed limits, then by how far they fail, then by the narrowest margin', () => {
    const check = (...margins: number[]) =>
      margins.map((margin) => ({ limit: 'groundWind' as const, value: 0, bound: 0, margin }))
    const order = rank([check(-3, 1), null, check(1, 4), check(-1, 1), check(2, 2), check(-1, -1)])
    expect(order).toEqual([4, 2, 3, 0, 5, 1])
  })
})

describe('the sun’s elevation', () => {
  // Solar position of NREL's algorithm, worked example: 17 October 2003, 19:30:30 UTC, 39.742476° N,
  // 105.1786° W: topocentric zenith 50.11162° with refraction (Reda and Andreas, Solar Energy 76, 2004, p. 577).
  it('is the published 39.888° within 0.02°', () => {
    const place = { latitude: 39.742476 * DEGREE, longitude: -105.1786 * DEGREE }
    const elevation = sunElevation(place, Date.UTC(2003, 9, 17, 19, 30, 30) / 1000) / DEGREE
    expect(Math.abs(elevation - (90 - 50.11162))).toBeLessThan(0.02)
  })
})
