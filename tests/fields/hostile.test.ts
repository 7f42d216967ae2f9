import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { decodeEntropy } from '../../src/fields/ccsdsPacking.ts'
import { FieldAir } from '../../src/fields/fieldAir.ts'
import { type FieldFile } from '../../src/fields/fieldFile.ts'
import { GribError } from '../../src/fields/gribError.ts'
import { OutsideField } from '../../src/fields/outsideField.ts'
import { flyAlongPath } from '../../src/physics/flight.ts'
import { NotFlyable } from '../../src/physics/notFlyable.ts'
import { standardFlight } from '../physics/plans.ts'
import { fixtureBytes, readPlanes } from './fixture.ts'
import { fieldFolder } from './storedField.ts'

/** Reads what may be anything; all that is allowed beside planes is a typed error. */
async function readAny(bytes: Uint8Array): Promise<void> {
  const started = performance.now()
  try {
    await readPlanes(bytes)
  } catch (error) {
    if (!(error instanceof GribError)) throw error
    expect(error.message).not.toBe('')
  }
  expect(performance.now() - started).toBeLessThan(5000)
}

function splitMessages(file: Buffer): Buffer[] {
  const messages: Buffer[] = []
  for (let at = 0; at < file.length;) {
    const length = Number(file.readBigUInt64BE(at + 8))
    messages.push(file.subarray(at, at + length))
    at += length
  }
  return messages
}

const messages = ['packings', 'bitmaps', 'scanning', 'projections'].flatMap((name) =>
  splitMessages(fixtureBytes(name)),
)

describe('no bytes do harm', () => {
  it('at random', async () => {
    await fc.assert(fc.asyncProperty(fc.uint8Array({ maxLength: 400 }), readAny), { numRuns: 300 })
  })

  it('at random behind a beginning that looks right', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...messages),
        fc.nat(400),
        fc.uint8Array({ maxLength: 400 }),
        async (message, kept, rest) => {
          const bytes = Buffer.concat([message.subarray(0, kept), rest, Buffer.from('7777')])
          if (bytes.length >= 16 && kept >= 8) bytes.writeBigUInt64BE(BigInt(bytes.length), 8)
          await readAny(bytes)
        },
      ),
      { numRuns: 300 },
    )
  })

  it('cut off anywhere', async () => {
    await fc.assert(
      fc.asyncProperty(fc.constantFrom(...messages), fc.nat(), async (message, at) => {
        await readAny(message.subarray(0, at % message.length))
      }),
      { numRuns: 200 },
    )
  })

  it('with bits turned', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...messages),
        fc.array(fc.nat(), { minLength: 1, maxLength: 4 }),
        async (message, flips) => {
          const bytes = Buffer.from(message)
          for (const flip of flips) {
            const bit = 16 * 8 + (flip % ((bytes.length - 20) * 8)) // the whole length stays right
            bytes[bit >> 3] ^= 0x80 >> (bit & 7)
          }
          await readAny(bytes)
        },
      ),
      { numRuns: 600 },
    )
  }, 60_000)

  it('as entropy-coded samples', () => {
    fc.assert(
      fc.property(
        fc.uint8Array({ maxLength: 300 }),
        fc.record({
          bitsPerSample: fc.integer({ min: 0, max: 40 }),
          blockSize: fc.constantFrom(0, 1, 8, 16, 32, 64, 255),
          referenceInterval: fc.integer({ min: 0, max: 4096 }),
          signed: fc.boolean(),
          preprocessed: fc.boolean(),
          restricted: fc.boolean(),
          padded: fc.boolean(),
        }),
        fc.integer({ min: 0, max: 5000 }),
        (bytes, coding, count) => {
          try {
            expect(decodeEntropy(bytes, coding, count)).toHaveLength(count)
          } catch (error) {
            if (!(error instanceof GribError)) throw error
          }
        },
      ),
      { numRuns: 500 },
    )
  })
})

describe('a damaged forecast', () => {
  const whole = fixtureBytes('gfs-region')
  const lengths = splitMessages(whole).map((message) => message.length)
  const fields = fieldFolder()

  it('is refused, or flown, or the flight is refused: nothing else', async () => {
    const outcomes = { refused: 0, flown: 0, notFlown: 0 }
    let round = 0
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.tuple(fc.nat(lengths.length - 1), fc.nat()), { minLength: 1, maxLength: 6 }),
        async (flips) => {
          const bytes = Buffer.from(whole)
          for (const [nth, flip] of flips) {
            const start = lengths.slice(0, nth).reduce((sum, length) => sum + length, 0)
            const bit = (start + 16) * 8 + (flip % ((lengths[nth] - 20) * 8))
            bytes[bit >> 3] ^= 0x80 >> (bit & 7)
          }
          let file: FieldFile
          try {
            file = await fields.store(bytes, `damaged-${round++}`)
          } catch (error) {
            if (!(error instanceof GribError)) throw error
            outcomes.refused++
            return
          }
          const plan = standardFlight({ altitude: 345, latitude: 40, longitude: -95 })
          const launch = { ...plan.launch, time: file.header.validTimes[0] + 600 }
          try {
            const { landing } = flyAlongPath({ ...plan, launch }, new FieldAir(file, 'hold'))
            expect(Number.isFinite(landing.latitude + landing.longitude + landing.elapsed)).toBe(
              true,
            )
            outcomes.flown++
          } catch (error) {
            if (!(error instanceof NotFlyable || error instanceof OutsideField)) throw error
            outcomes.notFlown++
          }
        },
      ),
      { numRuns: 60 },
    )
    expect(outcomes.refused).toBeGreaterThan(0)
    expect(outcomes.flown).toBeGreaterThan(0)
  }, 60_000)
})
