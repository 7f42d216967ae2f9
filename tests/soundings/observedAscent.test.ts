import { describe, expect, it } from 'vitest'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { observedAscent } from '../../src/soundings/observedAscent.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { fixture, readOne } from './samples.ts'

const wind = { windFromDeg: 270, windSpeedMs: 10 }

describe('the flight that a sounding was', () => {
  it('is that of a real ascent: to 31 966 gpm in 107 min 18 s', () => {
    const [barrow] = readSoundings(fixture('igra2-point-barrow-2010-06-01.txt'), {})
    const ascent = observedAscent(barrow)
    expect(ascent?.durationS).toBe(6438)
    expect(ascent?.highestAltitudeM).toBeCloseTo(32_127.6, 1)
    expect(ascent?.meanRateMs).toBeCloseTo(4.988, 3)
    expect(ascent?.drift).toBeNull()
  })

  it('is not known without elapsed times', () => {
    const [norman] = readSoundings(fixture('sounding-norman-2023-05-22.csv'), {})
    expect(observedAscent(norman)).toBeNull()
  })

  it('tells the drift along the geodesic', () => {
    const sounding = readOne({
      latitudeDeg: 0,
      longitudeDeg: 179.5,
      levels: [
        { geopotentialHeightM: 0, elapsedS: 0, ...wind },
        {
          geopotentialHeightM: 20_000,
          elapsedS: 4000,
          ...wind,
          latitudeDisplacementDeg: 0,
          longitudeDisplacementDeg: 1,
        },
      ],
    })
    const drift = observedAscent(sounding)?.drift
    expect(drift?.distanceM).toBeCloseTo(111_319.491, 3) // a degree of the equator, a·π/180 on WGS 84
    expect(drift?.bearingDeg).toBeCloseTo(90, 9)
    expect(drift?.longitudeDeg).toBeCloseTo(-179.5, 9)
    expect(drift?.altitudeM).toBeCloseTo(20_063.1, 1) // r0·H/(r0 − H)
    expect(levelsAnswer(sounding.levels)[1]).toMatchObject({
      elapsedS: 4000,
      latitudeDisplacementDeg: 0,
      longitudeDisplacementDeg: 1,
    })
  })
})
