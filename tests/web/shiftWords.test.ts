import { afterEach, expect, test } from 'vitest'
import { shiftWords } from '../../src/web/book/shiftWords.ts'
import { compassPoint } from '../../src/web/compass.ts'
import { unitSystem } from '../../src/web/readings.ts'

const shift = {
  againstRunId: '0193b0a0-0000-7000-8000-000000000000',
  landingDistanceM: 12_340,
  landingBearingDeg: 113,
  landingTimeS: 190,
  burstAltitudeM: -140,
  planChanged: false,
}

afterEach(() => {
  unitSystem.value = 'metric'
})

test('a shift is said as one would say it', () => {
  expect(shiftWords(shift)).toBe(
    'lands 12.3 km further east-southeast, 3 min later, bursts 140 m lower',
  )
  expect(shiftWords({ ...shift, landingDistanceM: 45_600, landingTimeS: -4000 })).toBe(
    'lands 46 km further east-southeast, 1 h 7 min earlier, bursts 140 m lower',
  )
  unitSystem.value = 'aviation'
  expect(shiftWords(shift)).toBe(
    'lands 6.7 NM further east-southeast, 3 min later, bursts 459 ft lower',
  )
})

test('what hardly changed is left out; a changed plan is named', () => {
  const little = { ...shift, landingDistanceM: 20, landingTimeS: 10, burstAltitudeM: 3 }
  expect(shiftWords(little)).toBe('lands and bursts as before')
  expect(shiftWords({ ...little, planChanged: true })).toBe(
    'lands and bursts as before (the plan was changed too)',
  )
  expect(shiftWords({ ...little, landingDistanceM: 1200 })).toBe(
    'lands 1.2 km further east-southeast',
  )
  expect(shiftWords(null)).toBe('first run of this flight')
})

test('the compass has sixteen points', () => {
  expect([0, 11, 12, 90, 180, 271, 359].map(compassPoint)).toEqual([
    'north',
    'north',
    'north-northeast',
    'east',
    'south',
    'west',
    'north',
  ])
})
