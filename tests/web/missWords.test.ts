import { expect, test } from 'vitest'
import { missWords } from '../../src/web/book/missWords.ts'
import { emptyDraft, outcomeOf } from '../../src/web/book/outcomeDraft.ts'
import { noticePath } from '../../src/web/notice/levels.ts'

const RUN = '0193b0a0-0000-7000-8000-000000000000'

test('a miss is said as one would say it', () => {
  const miss = {
    runId: RUN,
    landingDistanceM: 4321,
    landingBearingDeg: 200,
    landingTimeS: -420,
    burstAltitudeM: 610,
    burstTimeS: 12,
  }
  expect(missWords(miss)).toBe(
    'landed 4.3 km south-southwest of the prediction, landed 7 min earlier, burst 610 m higher, burst to the minute',
  )
})

test('what nobody observed is not compared', () => {
  const nothing = {
    runId: RUN,
    landingDistanceM: null,
    landingBearingDeg: null,
    landingTimeS: null,
    burstAltitudeM: null,
    burstTimeS: null,
  }
  expect(missWords(nothing)).toBe('nothing to compare it with yet')
  expect(missWords({ ...nothing, landingDistanceM: 8, landingBearingDeg: 10 })).toBe(
    'landed where it was predicted',
  )
})

test('an outcome comes back as it was typed, and what is empty is left out', () => {
  const typed = {
    ...emptyDraft(null),
    burstAltitude: '30950',
    landingTime: '2026-12-05T11:31',
    landingLatitude: '47.25',
    landingLongitude: '9.9',
  }
  const outcome = outcomeOf(typed)
  expect(outcome).toEqual({
    burst: { altitudeM: 30_950 },
    landing: { time: '2026-12-05T11:31Z', latitudeDeg: 47.25, longitudeDeg: 9.9 },
  })
  expect(emptyDraft(outcome as Parameters<typeof emptyDraft>[0])).toEqual(typed)
  expect(outcomeOf(emptyDraft(null))).toEqual({})
})

test('levels may be typed with spaces, semicolons or commas between', () => {
  const path = noticePath(RUN, { flightLevels: ' 50, 100;195  300 ', altitudesM: '' })
  expect(path).toBe(`/v1/runs/${RUN}/notice?flightLevels=50%2C100%2C195%2C300`)
})
