import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { type ColumnAir } from '../../src/physics/air.ts'
import { Column } from '../../src/physics/column.ts'
import { fly, type FlightPlan } from '../../src/physics/flight.ts'
import { type Whereabouts } from '../../src/physics/path.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { type SoundingLevel } from '../../src/physics/sounding.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { TrackRecorder } from '../../src/physics/track.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { standardFlight } from './plans.ts'

const file = new URL('../fixtures/sounding-norman-2023-05-22.csv', import.meta.url)
const norman = new ProfileAir(readSoundings(readFileSync(file), {})[0].levels)

/** A wind that turns about within every 150 m: worse than any real one. */
const shaken = new ProfileAir(
  Array.from({ length: 260 }, (_, i): SoundingLevel => {
    const [windEast, windNorth] = i % 2 === 0 ? [25, -15] : [-5, 15]
    return { geopotentialHeight: i * 150, windEast, windNorth }
  }),
)

const CASES: [string, FlightPlan, ColumnAir][] = [
  ['standard atmosphere', standardFlight(), standardAir],
  ['real sounding', standardFlight({ altitude: 345, latitude: 35.18 }), norman],
  ['shaken wind', standardFlight(), shaken],
  ['shaken wind, slow balloon', standardFlight({ neckLift: 1.6 }), shaken],
]

test.each(CASES)('straight lines between track points stay within 50 m: %s', (_name, plan, air) => {
  const recorder = new TrackRecorder()
  fly(plan, new Column(air), recorder)
  const track = recorder.track()

  // The same flight in slabs of 5 m, every step of it.
  const fine: Whereabouts[] = []
  fly(plan, new Column(air, 5), { record: (at) => fine.push({ ...at }) })

  let worst = 0
  let next = 1
  for (const at of fine) {
    while (next < track.length - 1 && track[next].elapsed < at.elapsed) next++
    const [a, b] = [track[next - 1], track[next]]
    const share = Math.min(1, (at.elapsed - a.elapsed) / (b.elapsed - a.elapsed))
    const north = at.latitude - a.latitude - share * (b.latitude - a.latitude)
    const east = at.longitude - a.longitude - share * (b.longitude - a.longitude)
    const up = at.altitude - a.altitude - share * (b.altitude - a.altitude)
    worst = Math.max(worst, Math.hypot(north * 6.37e6, east * 6.37e6 * Math.cos(at.latitude), up))
  }
  expect(worst).toBeLessThan(50)
})

test.each(CASES)('burst and landing stand exactly on points: %s', (_name, plan, air) => {
  const recorder = new TrackRecorder()
  const { burst, landing } = fly(plan, new Column(air), recorder)
  const track = recorder.track()
  const top = track.find((point) => point.phase === 'burst')
  const end = track[track.length - 1]
  expect(top).toMatchObject({ altitude: burst.altitude, elapsed: burst.elapsed })
  expect(end).toMatchObject({ phase: 'landing', altitude: landing.altitude })
  expect(track[0]).toMatchObject({ elapsed: 0, altitude: plan.launch.altitude, phase: 'ascent' })
  expect(track.map((point) => point.phase).join(' ')).toMatch(
    /^(ascent )+burst (descent )+landing$/,
  )
})

test.each(CASES)('recording a flight does not change it: %s', (_name, plan, air) => {
  const column = new Column(air)
  const plain = fly(plan, column)
  const recorded = fly(plan, column, new TrackRecorder())
  expect(recorded.landing.elapsed).toBeCloseTo(plain.landing.elapsed, 6)
  expect(recorded.landing.latitude).toBeCloseTo(plain.landing.latitude, 12)
  expect(recorded.landing.longitude).toBeCloseTo(plain.landing.longitude, 12)
})
