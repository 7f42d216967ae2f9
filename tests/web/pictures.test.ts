import { expect, test } from 'vitest'
import { elapsedOnAscent, momentAt } from '../../src/web/pictures/moment.ts'
import { type TrackRow } from '../../src/web/pictures/shownRun.ts'
import { windIn, windOfLevels } from '../../src/web/pictures/windColumn.ts'
import { contentType, uploadQuery } from '../../src/web/soundings/upload.ts'

const row = (changes: Partial<TrackRow>): TrackRow => ({
  elapsedS: 0,
  time: '2026-12-05T09:00:00.000Z',
  latitudeDeg: 60,
  longitudeDeg: 179.9,
  altitudeM: 100,
  verticalSpeedMs: 5,
  windFromDeg: 350,
  windSpeedMs: 10,
  phase: 'ascent',
  ...changes,
})

const track = [
  row({}),
  row({
    elapsedS: 1000,
    time: '2026-12-05T09:16:40.000Z',
    longitudeDeg: -179.9,
    altitudeM: 5100,
    windFromDeg: 10,
    phase: 'burst',
  }),
  row({
    elapsedS: 1500,
    time: '2026-12-05T09:25:00.000Z',
    longitudeDeg: -179.7,
    altitudeM: 100,
    verticalSpeedMs: -5,
    phase: 'landing',
  }),
]

test('halfway between two rows everything is halfway, also across the antimeridian and north', () => {
  const moment = momentAt(track, 500)
  expect(moment.time).toBe('2026-12-05T09:08:20.000Z')
  expect(moment.altitudeM).toBe(2600)
  expect(Math.abs(moment.longitudeDeg)).toBeCloseTo(180, 9)
  // The great circle between two places 0.2° apart at 60° N runs 0.00004° north of the parallel.
  expect(moment.latitudeDeg).toBeCloseTo(60, 3)
  // 10 m/s from 350° and from 010°: their mean is 10·cos 10° from north.
  expect(moment.windFromDeg % 360).toBeCloseTo(0, 9)
  expect(moment.windSpeedMs).toBeCloseTo(9.848, 3)
  expect(moment.phase).toBe('ascent')
})

test('rows are answered as they are, and the ends are held', () => {
  expect(momentAt(track, 1000)).toBe(track[1])
  expect(momentAt(track, -5)).toBe(track[0])
  expect(momentAt(track, 1500)).toBe(track[2])
  expect(momentAt(track, 9999)).toBe(track[2])
  expect(momentAt(track, 1250).phase).toBe('descent')
})

test('over a pole a moment lies on the way, not round the world', () => {
  const over = [
    row({ latitudeDeg: 89.9, longitudeDeg: 30 }),
    row({ elapsedS: 1000, latitudeDeg: 89.9, longitudeDeg: -150, phase: 'burst' }),
  ]
  expect(momentAt(over, 500).latitudeDeg).toBeCloseTo(90, 6)
  expect(momentAt(over, 250).latitudeDeg).toBeCloseTo(89.95, 6)
  expect(momentAt(over, 250).longitudeDeg).toBeCloseTo(30, 6)
})

test('a height on the way up is passed once', () => {
  expect(elapsedOnAscent(track, 2600)).toBe(500)
  expect(elapsedOnAscent(track, -100)).toBe(0)
  expect(elapsedOnAscent(track, 9000)).toBe(1000)
})

test('the wind of a sounding: straight components between levels, held and told beyond', () => {
  const level = (altitudeM: number, windFromDeg?: number, windSpeedMs?: number) => ({
    geopotentialHeightM: altitudeM,
    altitudeM,
    ...(windFromDeg === undefined || windSpeedMs === undefined ? {} : { windFromDeg, windSpeedMs }),
  })
  const levels = [level(200), level(500, 90, 10), level(1500, 180, 10), level(3000, 180, 4)]
  const column = windOfLevels(levels, 200, 4000)
  if (!column) throw new Error('no wind')
  expect(column.held).toEqual([
    { bottom: 200, top: 500, which: 'below' },
    { bottom: 3000, top: 4000, which: 'above' },
  ])
  expect(column.levels).toEqual([500, 1500, 3000])
  expect(windIn(column.winds, 300)).toMatchObject({ windFromDeg: 90, windSpeedMs: 10 })
  expect(windIn(column.winds, 3700)).toMatchObject({ windFromDeg: 180, windSpeedMs: 4 })
  // Halfway from an easterly to a southerly of 10 m/s: from the south-east, 10/√2 m/s.
  const between = windIn(column.winds, 1000)
  expect(between.windFromDeg).toBeCloseTo(135, 6)
  expect(between.windSpeedMs).toBeCloseTo(Math.SQRT1_2 * 10, 6)
  expect(windOfLevels([level(0), level(10)], 0, 100)).toBeNull()
})

test('what is said about a file goes with it, and what is not said does not', () => {
  expect(uploadQuery({ name: ' ', validAt: '' })).toBe('')
  expect(uploadQuery({ name: 'Site & hill', validAt: '2026-12-04T05:30' })).toBe(
    '?name=Site+%26+hill&validAt=2026-12-04T05%3A30%3A00Z',
  )
  expect(contentType('A.CSV')).toBe('text/csv')
  expect(contentType('ascent.json')).toBe('application/json')
  expect(contentType('temp.bufr')).toBe('application/octet-stream')
  expect(contentType('no-ending')).toBe('application/octet-stream')
})
