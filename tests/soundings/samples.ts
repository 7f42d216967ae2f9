import { readFileSync } from 'node:fs'
import { BadSounding } from '../../src/soundings/badSounding.ts'
import { readSoundings, type ReadOptions } from '../../src/soundings/readSoundings.ts'
import { type Sounding } from '../../src/soundings/profile.ts'

/** The bytes of a file under tests/fixtures/. */
export function fixture(name: string): Uint8Array {
  return readFileSync(new URL(`../fixtures/${name}`, import.meta.url))
}

export function bytesOf(text: string): Uint8Array {
  return new TextEncoder().encode(text)
}

/** The one sounding in a text, or in a value written as JSON. */
export function readOne(content: unknown, options: ReadOptions = {}): Sounding {
  const text = typeof content === 'string' ? content : JSON.stringify(content)
  const soundings = readSoundings(bytesOf(text), options)
  if (soundings.length !== 1) throw new Error(`${soundings.length} soundings instead of one`)
  return soundings[0]
}

/** Why a text, bytes, or a value written as JSON are refused; fails where they are not. */
export function refusalOf(content: unknown, options: ReadOptions = {}): BadSounding {
  const bytes =
    content instanceof Uint8Array
      ? content
      : bytesOf(typeof content === 'string' ? content : JSON.stringify(content))
  try {
    readSoundings(bytes, options)
  } catch (error) {
    if (error instanceof BadSounding) return error
    throw error
  }
  throw new Error('not refused')
}

/** What is broken of the promises of `SoundingLevel` and of a sounding that can be flown in. */
export function brokenPromises({ levels, latitude, longitude }: Sounding): string[] {
  const broken: string[] = []
  const check = (holds: boolean, what: string) => {
    if (!holds) broken.push(what)
  }
  let height = -Infinity
  let pressure = Infinity
  for (const [index, level] of levels.entries()) {
    const at = `level ${index}: `
    for (const value of Object.values(level) as unknown[]) {
      check(typeof value !== 'number' || Number.isFinite(value), at + 'not finite')
    }
    check(level.geopotentialHeight > height, at + 'height does not ascend')
    height = level.geopotentialHeight
    if (level.pressure !== undefined) {
      check(level.pressure < pressure && level.pressure > 0, at + 'pressure does not fall')
      pressure = level.pressure
    }
    check(level.temperature === undefined || level.pressure !== undefined, at + 'no pressure')
    check(
      level.vapourPressure === undefined || level.temperature !== undefined,
      at + 'vapour alone',
    )
    check((level.vapourPressure ?? 0) <= 0.2 * (level.pressure ?? Infinity), at + 'too much vapour')
    check((level.windEast === undefined) === (level.windNorth === undefined), at + 'half a wind')
    check(Math.hypot(level.windEast ?? 0, level.windNorth ?? 0) < 150.001, at + 'wind too strong')
    const warmth = level.temperature ?? 200
    check(warmth >= 150 && warmth <= 350, at + 'temperature out of range')
  }
  const winds = levels.filter((level) => level.windEast !== undefined).length
  const temperatures = levels.filter((level) => level.temperature !== undefined).length
  check(winds >= 2, `${winds} winds`)
  check(temperatures !== 1, 'one temperature')
  check((latitude === null) === (longitude === null), 'half a position')
  check(Math.abs(latitude ?? 0) <= Math.PI / 2, 'latitude out of range')
  check(longitude === null || (longitude >= -Math.PI && longitude < Math.PI), 'longitude unwrapped')
  return broken
}
