import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { standardLayers } from '../../src/physics/standardAtmosphere.ts'
import { BadSounding } from '../../src/soundings/badSounding.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { soundingFormats } from '../../src/soundings/recognise.ts'
import { type Sounding } from '../../src/soundings/profile.ts'
import { brokenPromises, bytesOf, fixture, readOne, refusalOf } from './samples.ts'

const barrow = fixture('igra2-point-barrow-2010-06-01.txt')
const norman = fixture('sounding-norman-2023-05-22.csv')

/** The soundings in some bytes, none where they are refused as they should be. */
function read(bytes: Uint8Array, options = {}): Sounding[] {
  try {
    return readSoundings(bytes, options)
  } catch (error) {
    if (!(error instanceof BadSounding)) throw error
    expect(error.problems.length).toBeGreaterThan(0)
    expect(error.problems.length).toBeLessThanOrEqual(20)
    for (const problem of error.problems) expect(problem.message.length).toBeLessThan(2000)
    return []
  }
}

/** Fails where a sounding breaks its promises or the air made of it is no air. */
function expectFlyable(soundings: readonly Sounding[]): void {
  const state = emptyAirState()
  for (const sounding of soundings) {
    expect(brokenPromises(sounding)).toEqual([])
    expect(sounding.notes.length).toBeLessThan(40)
    const air = new ProfileAir(sounding.levels)
    for (const altitude of [0, ...air.breakAltitudes, 49_000]) {
      if (altitude > 60_000) continue // beyond the ceiling of any flight
      air.sampleAltitude(altitude, state)
      expect(state.density).toBeGreaterThan(0)
      expect(Number.isFinite(state.density + state.windEast + state.windNorth)).toBe(true)
    }
  }
}

describe('the format', () => {
  it('is recognised from the content', () => {
    expect(readSoundings(barrow, {})[0].levels).toHaveLength(158)
    expect(readSoundings(norman, {})[0].levels).toHaveLength(256)
    const level = { pressureHPa: 900, windFromDeg: 1, windSpeedMs: 1 }
    expect(
      readOne(`\ufeff \n${JSON.stringify({ levels: [level, { ...level, pressureHPa: 800 }] })}`)
        .levels,
    ).toHaveLength(2)
  })

  it('can be given, and content of another format is then refused', () => {
    expect(readSoundings(norman, { format: 'csv' })).toHaveLength(1)
    expect(refusalOf(norman, { format: 'json' }).unparseable).toBe(true)
    expect(refusalOf(norman, { format: 'igra' }).unparseable).toBe(true)
    expect(refusalOf(barrow, { format: 'csv' }).unparseable).toBe(true)
  })

  it('is refused for nothing and for what is no text', () => {
    for (const bytes of [new Uint8Array(), bytesOf(' \n\n'), new Uint8Array(1000)]) {
      expect(refusalOf(bytes).unparseable).toBe(true)
    }
  })
})

describe('several soundings in one file', () => {
  const twice = Buffer.concat([
    barrow,
    Buffer.from(barrow.toString().replace('#USM00070026 2010 06 01', '#USM00070026 2010 06 02')),
  ])

  it('all take a given name, and keep their own times', () => {
    const soundings = readSoundings(twice, { name: 'Station', validAt: 0 })
    expect(soundings.map(({ name }) => name)).toEqual(['Station', 'Station'])
    expect(soundings.map(({ validAt }) => validAt)).toEqual([1275346980, 1275433380])
  })
})

describe('hostile bytes', () => {
  it('are soundings or refused: random bytes', () => {
    fc.assert(
      fc.property(
        fc.uint8Array({ maxLength: 2000 }),
        fc.constantFrom(undefined, ...soundingFormats),
        (bytes, format) => {
          expectFlyable(read(bytes, format ? { format } : {}))
        },
      ),
      { numRuns: 300 },
    )
  })

  it.each([
    ['IGRA', barrow],
    ['CSV', norman],
  ])('are soundings or refused: %s cut short and altered', (_, whole) => {
    const edits = fc.array(fc.tuple(fc.nat(whole.length - 1), fc.integer({ min: 32, max: 126 })), {
      maxLength: 20,
    })
    fc.assert(
      fc.property(fc.nat(whole.length), edits, (length, changes) => {
        const bytes = Uint8Array.from(whole)
        for (const [index, byte] of changes) bytes[index] = byte
        expectFlyable(read(bytes.subarray(0, length)))
      }),
      { numRuns: 150 },
    )
  })

  it('are soundings or refused: any numbers in any members', () => {
    const number = (min: number, max: number) =>
      fc.option(fc.double({ min, max, noNaN: true }), { nil: undefined, freq: 3 })
    const level = fc.record({
      pressureHPa: number(0.01, 1100),
      geopotentialHeightM: number(-1000, 60_000),
      altitudeM: number(-1000, 60_000),
      temperatureK: number(150, 350),
      dewPointK: number(100, 400),
      relativeHumidityPercent: number(-10, 120),
      windFromDeg: number(0, 360),
      windSpeedMs: number(0, 150),
      elapsedS: number(0, 10_000),
    })
    fc.assert(
      fc.property(fc.array(level, { maxLength: 8 }), (levels) => {
        expectFlyable(read(bytesOf(JSON.stringify({ levels }))))
      }),
      { numRuns: 1000 },
    )
  })

  it('are soundings: fair levels with parts left out, in any order', () => {
    const share = fc.integer({ min: 0, max: 1e6 }).map((parts) => parts / 1e6)
    const level = fc
      .noBias(fc.tuple(share, share, share, fc.nat(255)))
      .map(([depth, warmth, damp, parts]) => {
        const height = 35_000 * depth
        const has = (part: number) => (parts >> part) & 1
        return {
          ...(has(0) && { pressureHPa: standardLayers.pressure(height) / 100 }),
          ...((has(1) || !has(0)) && { geopotentialHeightM: height }),
          ...(has(2) && { temperatureK: 190 + 120 * warmth }),
          ...(has(3) && { relativeHumidityPercent: 100 * damp }),
          ...((has(4) || has(5)) && { windFromDeg: 360 * damp, windSpeedMs: 149 * warmth }),
          ...(has(6) && { elapsedS: height / 5 }),
        }
      })
    let flyable = 0
    fc.assert(
      fc.property(fc.array(level, { minLength: 3, maxLength: 30 }), (levels) => {
        const soundings = read(bytesOf(JSON.stringify({ levels })))
        flyable += soundings.length
        expectFlyable(soundings)
      }),
      { numRuns: 1000 },
    )
    expect(flyable).toBeGreaterThan(500)
  })

  it('take time in proportion: megabytes of each kind of junk in a few seconds', () => {
    const size = 4_000_000
    const fill = (text: string) =>
      Buffer.from(text.repeat(Math.ceil(size / text.length)).slice(0, size))
    const many = fill(barrow.toString())
    const bodies = [
      fill('0,'),
      fill('1\n'),
      fill('"'),
      fill('#\n'),
      fill('#USM00070026 2010 06 01 00 2303    0 ncdc6301 ncdc6301  712889 -1567833\n'),
      Buffer.from(`{"levels":[${'{},'.repeat(1_200_000)}{}]}`),
      Buffer.from(
        `{"levels":[{${Array.from({ length: 150_000 }, (_, i) => `"member${i}":1`).join(',')}}]}`,
      ),
      fill('[[[['),
      fill('\u0000\u0001\u0002'),
    ]
    for (const body of bodies) {
      const start = performance.now()
      expect(read(body)).toEqual([])
      expect(performance.now() - start).toBeLessThan(5000)
    }
    const start = performance.now()
    expect(readSoundings(many, {}).length).toBeGreaterThan(400)
    expect(performance.now() - start).toBeLessThan(5000)
  })
})
