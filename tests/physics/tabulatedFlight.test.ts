import { describe, expect, it } from 'vitest'
import { Column } from '../../src/physics/column.ts'
import { type DragChoice } from '../../src/physics/dragCurves.ts'
import { fly } from '../../src/physics/flight.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { inventedAir, inventedPlan } from '../planning/inventedAir.ts'

const METRES_PER_RADIAN = 6.37e6

const curves: DragChoice[] = [
  { curve: 'sounding-balloon' },
  { curve: 'smooth-sphere' },
  { curve: 'constant', coefficient: 0.3 },
]

describe('flight through the tables of a column', () => {
  it.each(curves)('is the flight stepped slab by slab: $curve', (drag) => {
    // Where the wind is the same at all heights a recorder asks for no shorter steps.
    const wind = { windEast: 12, windNorth: -7 }
    const column = new Column(
      new ProfileAir([
        { geopotentialHeight: 0, ...wind },
        { geopotentialHeight: 40_000, ...wind },
      ]),
    )
    const plan = inventedPlan({ drag })
    const tabulated = fly(plan, column)
    const stepped = fly(plan, column, { record: () => undefined })
    expect(stepped.burst.altitude).toBeCloseTo(tabulated.burst.altitude, 6)
    expect(stepped.landing.elapsed).toBeCloseTo(tabulated.landing.elapsed, 6)
    expect(stepped.landing.latitude).toBeCloseTo(tabulated.landing.latitude, 11)
    expect(stepped.landing.longitude).toBeCloseTo(tabulated.landing.longitude, 11)
    expect(stepped.ascent.lowestReynolds).toBeCloseTo(tabulated.ascent.lowestReynolds, 2)
    expect(stepped.descent.peakSpeed).toBeCloseTo(tabulated.descent.peakSpeed, 9)
  })

  it.each(curves)('lands within 10 m of a flight by eighths of the slabs: $curve', (drag) => {
    const air = inventedAir()
    const column = new Column(air)
    const fine = new Column(air, column.thickness / 8)
    for (const neckLift of [1.7, 2.3, 2.9, 3.5, 6]) {
      const plan = inventedPlan({ drag, neckLift })
      const coarse = fly(plan, column).landing
      const exact = fly(plan, fine).landing
      const north = (coarse.latitude - exact.latitude) * METRES_PER_RADIAN
      const east =
        (coarse.longitude - exact.longitude) * METRES_PER_RADIAN * Math.cos(exact.latitude)
      expect(Math.hypot(north, east)).toBeLessThan(10)
    }
  })
})
