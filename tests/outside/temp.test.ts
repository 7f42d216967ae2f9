import { describe, expect, it } from 'vitest'
import { complete } from '../../src/soundings/complete.ts'
import { Notes } from '../../src/soundings/notes.ts'
import { type ReportedLevel } from '../../src/soundings/profile.ts'
import { readTemp } from '../../src/soundings/temp.ts'
import { fixture } from '../soundings/samples.ts'

const reportOf = (name: string) =>
  readTemp(new TextDecoder().decode(fixture(name)), null, new Notes())[0]

const isThermalAnchor = (level: ReportedLevel): boolean =>
  level.geopotentialHeight !== undefined && level.temperature !== undefined

/**
 * A TEMP report gives the heights of standard surfaces beside the temperatures between them, so that
 * a group read wrongly anywhere shows in the hypsometric height of what lies above. Heights from the
 * 500 hPa surface up are given to 10 m.
 * Source: bulletins of the two stations as exchanged on the WMO GTS.
 */
describe('heights of the standard surfaces in TEMP reports, from the lowest up', () => {
  it.each([
    // Worst of 11: 8.1 m, at 300 hPa.
    ['temp-jackson-2006-09-22.txt', 11, 8.2],
    // Worst of 13: 7.2 m, at 50 hPa.
    ['temp-sao-paulo-day-23.txt', 13, 7.3],
  ])('%s: %i surfaces within %f m', (name, count, tolerance) => {
    const report = reportOf(name)
    const anchors = report.levels
      .filter(isThermalAnchor)
      .sort((a, b) => (b.pressure ?? 0) - (a.pressure ?? 0))
    const levels = report.levels.map((level): ReportedLevel => {
      const copy = { ...level }
      if (level !== anchors[0]) delete copy.geopotentialHeight
      return copy
    })
    const completed = complete({ ...report, levels }, name, new Notes()).levels
    expect(anchors).toHaveLength(count)
    for (const { pressure, geopotentialHeight } of anchors) {
      const level = completed.find((candidate) => candidate.pressure === pressure)
      const error = (level?.geopotentialHeight ?? NaN) - (geopotentialHeight ?? NaN)
      expect(Math.abs(error), `at ${pressure ?? 0} Pa`).toBeLessThan(tolerance)
    }
  })

  it('puts the surface of station 83779 at its elevation, 722 m', () => {
    // The elevation is from memory (WMO-No. 9, volume A); the report tells only pressures there.
    const [surface] = complete(reportOf('temp-sao-paulo-day-23.txt'), '83779', new Notes()).levels
    expect(surface.pressure).toBe(93_800)
    expect(Math.abs(surface.geopotentialHeight - 722)).toBeLessThan(1)
  })
})
