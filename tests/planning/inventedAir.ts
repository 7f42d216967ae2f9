import { ProfileAir } from '../../src/physics/profileAir.ts'
import { type FlightPlan } from '../../src/physics/flight.ts'
import { type SoundingLevel } from '../../src/physics/sounding.ts'
import { standardLayers } from '../../src/physics/standardAtmosphere.ts'

const DEGREE = Math.PI / 180

/**
 * An invented sounding, a level every 250 m up to 32 km: the standard atmosphere with a bent temperature
 * curve, moist below, a jet at 11 km and easterlies above 20 km. `turn` radians turns all its winds.
 */
export function inventedLevels(turn = 0): SoundingLevel[] {
  return Array.from({ length: 128 }, (_, i) => {
    const height = 250 + i * 250
    const speed = 6 + 34 * Math.exp(-(((height - 11_000) / 4000) ** 2)) + 3 * Math.sin(height / 700)
    const from = (height > 20_000 ? 95 : 240 + height / 300) * DEGREE + turn
    return {
      geopotentialHeight: height,
      pressure: standardLayers.pressure(height),
      temperature: standardLayers.temperature(height) + 2 * Math.sin(height / 1100),
      vapourPressure: height < 8000 ? 900 * Math.exp(-height / 2200) : 0,
      windEast: -speed * Math.sin(from),
      windNorth: -speed * Math.cos(from),
    }
  })
}

export function inventedAir(turn = 0): ProfileAir {
  return new ProfileAir(inventedLevels(turn))
}

/** An invented plan: a 1 kg balloon with 1.2 kg below, from a plain at 50° north. */
export function inventedPlan(change: Partial<FlightPlan> = {}): FlightPlan {
  return {
    launch: { latitude: 50 * DEGREE, longitude: 8 * DEGREE, altitude: 300, time: 1_750_000_000 },
    balloon: { mass: 1, ratedBurstDiameter: 7.5, shareLeftOnLine: 0 },
    gas: { kind: 'helium', purity: 1, temperatureOffset: 0 },
    neckLift: 2.3,
    payloadMass: 1.2,
    parachute: { seaLevelDescent: 5 },
    drag: { curve: 'sounding-balloon' },
    landingAltitude: 300,
    ...change,
  }
}
